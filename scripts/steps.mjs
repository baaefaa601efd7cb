// Steps that starting, testing and measuring share. Nothing but Node itself is imported: it runs before an install.
import { spawn, spawnSync } from 'node:child_process'
import { createHash } from 'node:crypto'
import { existsSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs'
import { join, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'

export const root = resolve(fileURLToPath(new URL('..', import.meta.url)))
const nuxt = join(root, 'node_modules', 'nuxt', 'bin', 'nuxt.mjs')

/** A step that cannot go on, with what to do about it. Printed as it is, without a stack. */
export class StepError extends Error {}

/** Reads like engines.node of package.json: 20.19 or later of the 20 line, or 22.12 and later. */
export function requireNode(version = process.versions.node) {
  const [major, minor] = version.split('.').map(Number)
  const good = (major === 20 && minor >= 19) || (major === 22 && minor >= 12) || major > 22
  if (!good) {
    throw new StepError(`Counterpoise needs Node 20.19 or later of the 20 line, or Node 22.12 or later. This is Node ${version}: install one of those and try again.`)
  }
}

/** Runs a program in the project's folder, its output passed on as it comes and kept. */
export function run(command, args, { env = {}, quiet = false } = {}) {
  return new Promise((done) => {
    const child = spawn(command, args, { cwd: root, env: { ...process.env, ...env }, stdio: ['ignore', 'pipe', 'pipe'], shell: process.platform === 'win32' && command === 'npm' })
    let output = ''
    const pass = stream => (chunk) => {
      output += chunk
      if (!quiet) stream.write(chunk)
    }
    child.stdout.on('data', pass(process.stdout))
    child.stderr.on('data', pass(process.stderr))
    child.on('error', error => done({ code: 127, output: `${output}${error.message}\n` }))
    child.on('close', (code, signal) => {
      if (signal) console.error(`${[command, ...args].join(' ')} was ended by ${signal}, from outside.`)
      done({ code: code ?? 1, output })
    })
  })
}

const readJson = file => JSON.parse(readFileSync(file, 'utf8'))

/** Why node_modules does not hold what package-lock.json asks for; null where it does. */
export function installNeeded() {
  const record = join(root, 'node_modules', '.package-lock.json')
  if (!existsSync(record)) return 'nothing is installed yet'
  const have = readJson(record).packages
  for (const [path, wanted] of Object.entries(readJson(join(root, 'package-lock.json')).packages)) {
    if (path === '' || wanted.optional || wanted.link) continue
    if (have[path]?.version !== wanted.version) return `${path.replace(/^.*node_modules\//, '')} ${wanted.version} is missing`
  }
  if (!existsSync(join(root, 'node_modules', 'better-sqlite3', 'build', 'Release', 'better_sqlite3.node'))) return 'better-sqlite3 is not compiled'
  return null
}

const found = program => spawnSync(program, ['--version'], { stdio: 'ignore', shell: process.platform === 'win32' }).status === 0

/** Says why an install failed where the reason is known. */
function installFailure(output) {
  if (!/gyp|better-sqlite3|node-pre|make: |g\+\+/.test(output)) return 'npm could not install the packages; its own message stands above.'
  const missing = ['python3', 'make', 'g++'].filter(program => !found(program))
  const what = missing.length ? `Missing here: ${missing.join(', ')}.` : 'All three were found, so the reason stands in the output above.'
  return `better-sqlite3 could not be compiled. It needs python3, make and g++. ${what}\n`
    + 'On Debian or Ubuntu: apt-get install python3 make g++. On macOS: xcode-select --install.'
}

/** Installs with `npm ci` when something is missing or the lock file changed. Returns whether it had to. */
export async function install() {
  const reason = installNeeded()
  if (!reason) return false
  console.log(`Installing packages (${reason}). This takes a few minutes the first time.`)
  const { code, output } = await run('npm', ['ci', '--no-audit', '--no-fund'])
  if (code !== 0 || installNeeded()) throw new StepError(installFailure(output))
  return true
}

const inputs = [
  'app', 'server', 'shared', 'public', 'drizzle',
  'scripts/bundle-runtime.ts', 'nuxt.config.ts', 'tailwind.config.ts', 'tsconfig.json', 'package.json', 'package-lock.json',
]

function* filesUnder(path) {
  if (!statSync(path).isDirectory()) return yield path
  for (const name of readdirSync(path).sort()) yield* filesUnder(join(path, name))
}

/** SHA-256 over names and bytes of everything that a build depends on. */
export function inputHash() {
  const hash = createHash('sha256').update(`${process.versions.node} ${process.arch}\n`)
  for (const input of inputs) {
    const path = join(root, input)
    if (!existsSync(path)) continue
    for (const file of filesUnder(path)) hash.update(`${file.slice(root.length)}\n`).update(readFileSync(file))
  }
  return hash.digest('hex')
}

const stamp = join(root, '.output', 'inputs.sha256')
export const server = join(root, '.output', 'server', 'index.mjs')

/** Builds unless what stands in .output was made from these very inputs. Returns whether it had to. */
export async function build() {
  const wanted = inputHash()
  if (existsSync(server) && existsSync(stamp) && readFileSync(stamp, 'utf8') === wanted) return false
  console.log('Building. This takes one to two minutes.')
  const { code } = await run(process.execPath, [nuxt, 'build'], { env: { NODE_ENV: 'production', NUXT_TELEMETRY_DISABLED: '1' } })
  if (code !== 0 || !existsSync(server)) throw new StepError('The build failed; its own message stands above.')
  writeFileSync(stamp, wanted)
  return true
}

const browsers = ['/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome', '/usr/bin/google-chrome-stable', '/Applications/Google Chrome.app/Contents/MacOS/Google Chrome', '/Applications/Chromium.app/Contents/MacOS/Chromium']

/** Path of a Chromium: CHROMIUM_PATH, a usual place, or one that apt installs where this process may. */
export async function chromium() {
  const present = () => [process.env.CHROMIUM_PATH, ...browsers].find(path => path && existsSync(path))
  if (present()) return present()
  if (process.platform === 'linux' && process.getuid?.() === 0 && found('apt-get')) {
    console.log('Installing Chromium through apt.')
    const env = { DEBIAN_FRONTEND: 'noninteractive' }
    await run('apt-get', ['update', '-q'], { env, quiet: true })
    await run('apt-get', ['install', '-y', '-q', '--no-install-recommends', 'chromium'], { env, quiet: true })
    if (present()) return present()
  }
  throw new StepError('The browser tests need Chromium, and none was found. Install it (Debian: apt-get install chromium), or name one: CHROMIUM_PATH=/path/to/chromium npm test')
}

/** The programs that read a report back in its tests; installed through apt where this process may. */
export async function poppler() {
  const missing = () => ['pdftotext', 'pdftoppm', 'pdffonts', 'pdfimages'].filter(program => spawnSync(program, ['-v'], { stdio: 'ignore' }).error)
  if (!missing().length) return
  if (process.platform === 'linux' && process.getuid?.() === 0 && found('apt-get')) {
    console.log('Installing poppler-utils through apt.')
    const env = { DEBIAN_FRONTEND: 'noninteractive' }
    await run('apt-get', ['update', '-q'], { env, quiet: true })
    await run('apt-get', ['install', '-y', '-q', '--no-install-recommends', 'poppler-utils'], { env, quiet: true })
  }
  if (missing().length) throw new StepError(`The tests of the PDF report need ${missing().join(', ')}. Install them (Debian: apt-get install poppler-utils) and run npm test again.`)
}

/** The program that writes and reads outlines beside ours in the tests of files; installed through apt where this process may. */
export async function gdal() {
  const present = () => !spawnSync('ogr2ogr', ['--version'], { stdio: 'ignore' }).error
  if (present()) return
  if (process.platform === 'linux' && process.getuid?.() === 0 && found('apt-get')) {
    console.log('Installing gdal-bin through apt.')
    const env = { DEBIAN_FRONTEND: 'noninteractive' }
    await run('apt-get', ['update', '-q'], { env, quiet: true })
    await run('apt-get', ['install', '-y', '-q', '--no-install-recommends', 'gdal-bin'], { env, quiet: true })
  }
  if (!present()) throw new StepError('The tests of outline files need ogr2ogr. Install it (Debian: apt-get install gdal-bin) and run npm test again.')
}

/** Prints a failure the way people can use it and ends the process. */
export function fail(error) {
  console.error(error instanceof StepError ? `\n${error.message}` : error)
  process.exit(1)
}
