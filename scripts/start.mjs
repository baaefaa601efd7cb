// npm start: installs and builds what is missing, then serves. A second start does neither.
import { spawn } from 'node:child_process'
import { createServer } from 'node:net'
import { build, fail, install, requireNode, root, server, StepError } from './steps.mjs'

const host = process.env.NITRO_HOST || process.env.HOST || '127.0.0.1'
const portText = process.env.NITRO_PORT || process.env.PORT || '3000'

try {
  requireNode()
  const port = readPort(portText)
  // Asked at once, so that nobody waits for a build to learn it.
  await requireFreePort(port)
  await install()
  await build()
  serve(port)
}
catch (error) {
  fail(error)
}

function readPort(text) {
  const port = Number(text)
  if (!Number.isInteger(port) || port < 1 || port > 65535) throw new StepError(`PORT must be a whole number from 1 to 65535, got “${text}”.`)
  return port
}

function requireFreePort(port) {
  return new Promise((done, refuse) => {
    const probe = createServer()
    probe.once('error', (error) => {
      if (error.code === 'EADDRINUSE') refuse(new StepError(`Port ${port} on ${host} is in use by another program. Stop that one, or choose another port: PORT=${port < 65535 ? port + 1 : 3000} npm start`))
      else if (error.code === 'EACCES') refuse(new StepError(`Port ${port} may not be opened by this user. Choose one above 1023: PORT=3000 npm start`))
      else refuse(new StepError(`The server cannot listen on HOST ${host}, port ${port}: ${error.message}`))
    })
    probe.listen({ port, host }, () => probe.close(done))
  })
}

function serve(port) {
  const child = spawn(process.execPath, [server], {
    cwd: root,
    env: { ...process.env, NODE_ENV: process.env.NODE_ENV || 'production', HOST: host, PORT: String(port), NITRO_HOST: host, NITRO_PORT: String(port), NUXT_DATA_DIR: process.env.NUXT_DATA_DIR || '.data' },
    stdio: 'inherit',
  })
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => child.kill(signal))
  child.on('exit', (code, signal) => process.exit(code ?? (signal === 'SIGINT' || signal === 'SIGTERM' ? 0 : 1)))
  void announce(`http://${host.includes(':') ? `[${host}]` : host === '127.0.0.1' || host === '0.0.0.0' ? 'localhost' : host}:${port}`, child)
}

/** Says where to go once the server really answers: on an empty database the demo is seeded first. */
async function announce(url, child) {
  while (child.exitCode === null && child.signalCode === null) {
    const answer = await fetch(`${url}/api/v1/health`).catch(() => null)
    if (answer?.ok) return console.log(`\nCounterpoise is ready: ${url}\n`)
    await new Promise(wait => setTimeout(wait, 200))
  }
}
