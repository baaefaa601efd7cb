// npm test: what stands in the way of a release, in order; `npm test -- lint unit` runs some of it.
// The last line is “N passed, N failed”. A step that fails does not keep the others from running.
import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { build, chromium, fail, gdal, install, poppler, requireNode, root, run, StepError } from './steps.mjs'

const program = (...path) => join(root, 'node_modules', ...path)
const names = ['lint', 'types', 'unit', 'build', 'integration', 'browser']
const chosen = process.argv.slice(2)
const results = []

try {
  requireNode()
  const unknown = chosen.filter(name => !names.includes(name))
  if (unknown.length) throw new StepError(`There is no step “${unknown[0]}”. The steps are ${names.join(', ')}.`)
  await install()
}
catch (error) {
  fail(error)
}

const wanted = name => !chosen.length || chosen.includes(name)
const whole = code => ({ passed: code === 0 ? 1 : 0, failed: code === 0 ? 0 : 1 })
let built = true

/** Runs one step, times it and keeps its counts; whatever it throws is one failure of that name. */
async function step(name, work) {
  if (!wanted(name)) return
  console.log(`\n── ${name}`)
  const started = performance.now()
  let counts
  try {
    counts = await work()
  }
  catch (error) {
    console.error(error instanceof StepError ? error.message : error)
    counts = whole(1)
  }
  results.push({ name, seconds: (performance.now() - started) / 1000, ...counts })
}

async function lint() {
  const { code } = await run(process.execPath, [program('eslint', 'bin', 'eslint.js'), '.', '--max-warnings', '0', '--cache', '--cache-location', '.cache/eslint/'])
  return whole(code)
}

/** Type checks while other steps run; its output comes in one piece. */
function typesInBackground() {
  const started = performance.now()
  const checked = wanted('types') ? run(process.execPath, [program('vue-tsc', 'bin', 'vue-tsc.js'), '-b', '--noEmit'], { quiet: true }) : null
  return async () => {
    const { code, output } = await checked
    process.stdout.write(output)
    console.log(`types: ${((performance.now() - started) / 1000).toFixed(0)} s beside the steps above`)
    return whole(code)
  }
}

/** One project of vitest.config.ts. Tests that were passed over count as failed: nothing is skipped in silence. */
async function tests(project, env = {}) {
  const report = join(root, '.cache', 'test', `${project}.json`)
  mkdirSync(join(root, '.cache', 'test'), { recursive: true })
  rmSync(report, { force: true })
  const { code } = await run(process.execPath, [program('vitest', 'vitest.mjs'), 'run', '--project', project, '--reporter', 'default', '--reporter', 'json', '--outputFile.json', report], { env })
  if (!existsSync(report)) return whole(1)
  const { numPassedTests, numTotalTests, testResults } = JSON.parse(readFileSync(report, 'utf8'))
  const brokenFiles = testResults.filter(file => file.status === 'failed' && !file.assertionResults.some(test => test.status === 'failed')).length
  const failed = numTotalTests - numPassedTests + brokenFiles
  return { passed: numPassedTests, failed: failed || (code === 0 && numTotalTests > 0 ? 0 : 1) }
}

function needsBuild() {
  if (!built) throw new StepError('There is no built server to test: the build failed.')
}

if (wanted('lint') || wanted('types')) await run(process.execPath, [program('nuxt', 'bin', 'nuxt.mjs'), 'prepare'], { env: { NUXT_TELEMETRY_DISABLED: '1' }, quiet: true })
const types = typesInBackground()
await step('lint', lint)
await step('unit', async () => {
  await poppler()
  await gdal()
  return tests('unit')
})
await step('types', types)
if (['build', 'integration', 'browser'].some(wanted)) {
  const making = async () => {
    built = false
    await build()
    built = true
    return whole(0)
  }
  await (wanted('build') ? step('build', making) : making().catch(error => console.error(error.message)))
}
await step('integration', () => {
  needsBuild()
  return tests('integration')
})
await step('browser', async () => {
  needsBuild()
  return tests('browser', { CHROMIUM_PATH: await chromium() })
})

console.log()
for (const { name, seconds, passed, failed } of results) console.log(`${name.padEnd(12)} ${String(passed).padStart(5)} passed ${String(failed).padStart(4)} failed ${seconds.toFixed(1).padStart(7)} s`)
const sum = key => results.reduce((total, result) => total + result[key], 0)
console.log(`\n${sum('passed')} passed, ${sum('failed')} failed`)
process.exit(sum('failed') ? 1 : 0)
