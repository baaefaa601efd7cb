import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { schema } from '../../../server/database/client'
import { Mail, mailFrom, smtpDelivery } from '../../../server/services/mail'
import { temporaryContext } from '../../support/context'
import { mailServer } from '../../support/smtp'

// Over real conversations with a mail server (smtp-server, RFC 5321) on this machine.

let server: Awaited<ReturnType<typeof mailServer>>
let context: ReturnType<typeof temporaryContext>
let mail: Mail
let clock = Date.UTC(2026, 0, 1)
const letter = { recipient: 'ada@mail.example', subject: 'A link', text: 'https://counterpoise.example/invitation/' + 'x'.repeat(80) }

beforeEach(async () => {
  server = await mailServer()
  context = temporaryContext()
  const now = () => new Date(clock).toISOString()
  mail = new Mail({ db: context.db, now }, 'https://counterpoise.example/', await smtpDelivery({ url: server.url, from: 'Counterpoise <post@counterpoise.example>', site: '' }))
})
afterEach(async () => {
  await mail.close()
  await server.close()
  context.dispose()
})

describe('the outbox', () => {
  it('sends what was put in it, once, and keeps no text of it', async () => {
    context.db.transaction(tx => mail.put(tx, letter))
    await mail.send()
    await mail.send()
    expect(server.received).toMatchObject([{ from: 'post@counterpoise.example', to: ['ada@mail.example'], subject: 'A link' }])
    expect(server.received[0]!.text.trim()).toBe(letter.text)
    expect(context.db.select().from(schema.outbox).all()).toMatchObject([{ text: '', tries: 1, fault: null, sentAt: expect.any(String) }])
  })

  it('tries again later where the mail server does not take it, and after six tries no more', async () => {
    const said = vi.spyOn(console, 'error').mockImplementation(() => {})
    context.db.transaction(tx => mail.put(tx, letter))
    server.state.refuse = true
    await mail.send()
    expect(context.db.select().from(schema.outbox).all()).toMatchObject([{ tries: 1, sentAt: null, fault: expect.stringContaining('try again later') }])
    await mail.send()
    expect(context.db.select().from(schema.outbox).get()!.tries).toBe(1)
    server.state.refuse = false
    clock += 61_000
    await mail.send()
    expect(server.received).toHaveLength(1)

    context.db.transaction(tx => mail.put(tx, letter))
    server.state.refuse = true
    for (let i = 0; i < 10; i++) {
      clock += 24 * 3600_000
      await mail.send()
    }
    expect(context.db.select().from(schema.outbox).all().map(row => row.tries)).toEqual([2, 6])
    said.mockRestore()
  })

  it('loses a letter whose change did not happen', async () => {
    expect(() => context.db.transaction((tx) => {
      mail.put(tx, letter)
      throw new Error('refused')
    })).toThrow('refused')
    await mail.send()
    expect(server.received).toEqual([])
  })
})

describe('the settings', () => {
  it('are all there, all empty, or refused', async () => {
    const given = { url: server.url, from: 'post@counterpoise.example', site: 'https://counterpoise.example' }
    expect(await mailFrom(context, { url: '', from: '', site: '' })).toBeNull()
    for (const part of [{ url: '' }, { from: '' }, { site: '' }, { url: 'http://mail.example' }, { site: 'counterpoise.example' }]) {
      await expect(mailFrom(context, { ...given, ...part })).rejects.toThrow('NUXT_MAIL_SITE')
    }
    await (await mailFrom(context, given))!.close()
  })
})
