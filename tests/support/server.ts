import { spawn, type ChildProcess } from 'node:child_process'
import { existsSync, mkdtempSync, rmSync } from 'node:fs'
import { createServer } from 'node:net'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'

/** The built server's folder; the tests never build it themselves. */
export const buildDir = resolve(process.env.COUNTERPOISE_BUILD ?? '.output')

export interface RunningServer {
  url: string
  dataDir: string
  pid: number
  /** Everything that the server wrote so far. */
  output: () => string
  /** Ends the server by its process id; its data folder goes too unless it is kept for another start. */
  stop: (options?: { keepData?: boolean }) => Promise<void>
}

export async function freePort(): Promise<number> {
  const probe = createServer()
  await new Promise<void>(done => probe.listen(0, '127.0.0.1', done))
  const { port } = probe.address() as { port: number }
  await new Promise(done => probe.close(done))
  return port
}

/**
 * Starts the built server on a free loopback port with a data folder of its own, every answer held to its contract,
 * and waits until it lets requests in.
 */
export async function startServer(env: Record<string, string> = {}, givenDataDir?: string): Promise<RunningServer> {
  const entry = join(buildDir, 'server', 'index.mjs')
  if (!existsSync(entry)) throw new Error(`There is no built server at ${entry}: run npm test, or npm run build first.`)
  const dataDir = givenDataDir ?? mkdtempSync(join(tmpdir(), 'counterpoise-test-'))
  const port = await freePort()
  const child = spawn(process.execPath, [entry], {
    env: { PATH: process.env.PATH, NODE_ENV: 'production', PORT: String(port), NUXT_DATA_DIR: dataDir, COUNTERPOISE_CHECK_ANSWERS: '1', ...env },
    stdio: ['ignore', 'pipe', 'pipe'],
  })
  let output = ''
  child.stdout.on('data', chunk => output += chunk)
  child.stderr.on('data', chunk => output += chunk)
  const url = `http://127.0.0.1:${port}`
  await ready(url, child, () => output)
  return {
    url, dataDir, pid: child.pid!, output: () => output,
    stop: async ({ keepData = false } = {}) => {
      await ended(child)
      if (!keepData) rmSync(dataDir, { recursive: true, force: true })
    },
  }
}

async function ready(url: string, child: ChildProcess, output: () => string) {
  for (let i = 0; i < 300; i++) {
    if (child.exitCode !== null) throw new Error(`The server ended with code ${child.exitCode}:\n${output()}`)
    const answer = await fetch(`${url}/api/v1/health`).catch(() => null)
    if (answer?.ok) return
    await new Promise(wait => setTimeout(wait, 100))
  }
  child.kill('SIGKILL')
  throw new Error(`The server was not ready after 30 s:\n${output()}`)
}

async function ended(child: ChildProcess) {
  if (child.exitCode !== null || child.signalCode !== null) return
  const closed = new Promise(done => child.once('exit', done))
  child.kill('SIGTERM')
  const hard = setTimeout(() => child.kill('SIGKILL'), 5000)
  await closed
  clearTimeout(hard)
}
