import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join, resolve } from 'node:path'
import { openStore, type Store } from '../database/client'
import { seedDemo } from '../services/demo'
import { earthModelFrom } from '../services/earthModelFile'
import { Jobs } from '../services/jobs'
import { mailFrom, type Mail, type MailSettings } from '../services/mail'
import { createThrottle, firstOperatorToken } from '../services/people'
import type { Context } from '../services/context'
import { setContext } from '../utils/context'
import { runtimeFile } from '../utils/runtimeFiles'
import { secretToken } from '../services/hash'

// The server listens on this machine alone unless told otherwise, however it is started.
process.env.HOST ??= '127.0.0.1'

const loopback = (host: string) => host === 'localhost' || host === '::1' || host.startsWith('127.')

/** Opens the data folder, makes the session secret on first start, and lets requests in when all is ready. */
export default defineNitroPlugin((nitroApp) => {
  const config = useRuntimeConfig()
  const dataDir = resolve(config.dataDir)
  mkdirSync(dataDir, { recursive: true, mode: 0o700 })
  process.env.NUXT_SESSION_PASSWORD ??= sessionSecret(dataDir)

  const store = openStore(dataDir, runtimeFile('migrations'))
  const jobs = new Jobs(runtimeFile('workers', 'run.mjs'), optionalFile('earth', 'fields.bin'))
  nitroApp.hooks.hook('close', async () => {
    setContext(undefined)
    await mail?.close()
    await jobs.close()
    store.close()
  })
  // Nitro does not wait for plugins: until all is ready, routes answer 503 “starting”.
  let mail: Mail | null = null
  void begin(store, jobs, config.demo !== 'off', config.mail).then((context) => { mail = context.mail })
})

async function begin(store: Store, jobs: Jobs, demo: boolean, mail: MailSettings): Promise<Context> {
  try {
    const host = process.env.NITRO_HOST || process.env.HOST!
    const now = () => new Date().toISOString()
    const context: Context = {
      ...store, jobs, now,
      earth: await earthModelFrom(optionalFile('earth', 'fields.bin')),
      demo: demo && loopback(host),
      throttle: createThrottle(),
      mail: await mailFrom({ ...store, now }, mail),
      passwords: { hash: hashPassword, verify: verifyPassword },
    }
    jobs.resume(context)
    await seedDemo(context)
    setContext(context)
    const token = firstOperatorToken(context)
    if (token) console.log(`[counterpoise] No people yet. Open this one-time link to make the first operator:\n  http://${host}:${process.env.PORT || 3000}/invitation/${token}`)
    return context
  }
  catch (error) {
    console.error('[counterpoise] The server could not start:', error)
    process.exit(1)
  }
}

function optionalFile(...parts: string[]) {
  try {
    return runtimeFile(...parts)
  }
  catch {
    return null
  }
}

function sessionSecret(dataDir: string): string {
  const file = join(dataDir, 'session-secret')
  if (!existsSync(file)) writeFileSync(file, secretToken(), { mode: 0o600 })
  return readFileSync(file, 'utf8').trim()
}
