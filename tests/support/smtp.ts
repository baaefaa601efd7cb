import { SMTPServer } from 'smtp-server'

export interface Received { from: string, to: string[], subject: string, text: string }

/** A mail server on this machine that keeps what it is given (smtp-server); `refuse` makes it say no for a while, as RFC 5321 code 451. */
export async function mailServer() {
  const received: Received[] = []
  const state = { refuse: false }
  const server = new SMTPServer({
    authOptional: true, disabledCommands: ['STARTTLS'],
    onMailFrom: (_address, _session, done) => done(state.refuse ? Object.assign(new Error('try again later'), { responseCode: 451 }) : null),
    onData: (stream, session, done) => {
      const chunks: Buffer[] = []
      stream.on('data', (chunk: Buffer) => chunks.push(chunk))
      stream.on('end', () => {
        const [head = '', ...body] = Buffer.concat(chunks).toString('utf8').split('\r\n\r\n')
        const { mailFrom, rcptTo } = session.envelope
        received.push({ from: mailFrom ? mailFrom.address : '', to: rcptTo.map(({ address }) => address), subject: /^Subject: (.*)$/m.exec(head)?.[1] ?? '', text: decoded(body.join('\n\n'), /quoted-printable/i.test(head)) })
        done()
      })
    },
  })
  await new Promise<void>(ready => server.listen(0, '127.0.0.1', ready))
  const { port } = server.server.address() as { port: number }
  return { url: `smtp://127.0.0.1:${port}`, received, state, close: () => new Promise<void>(done => server.close(done)) }
}

/** Quoted-printable text (RFC 2045, 6.7). */
function decoded(body: string, quoted: boolean): string {
  if (!quoted) return body
  const bytes = body.replace(/=\r?\n/g, '').replace(/=([0-9A-F]{2})/g, (_, hex: string) => String.fromCharCode(Number.parseInt(hex, 16)))
  return Buffer.from(bytes, 'latin1').toString('utf8')
}
