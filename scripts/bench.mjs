// npm run bench: measures what has a limit, and prints the figures with the machine that made them.
import { build, chromium, fail, install, requireNode, run } from './steps.mjs'

try {
  requireNode()
  await install()
  await build()
  const { code } = await run(process.execPath, ['scripts/run-ts.mjs', 'tests/bench/run.ts', ...process.argv.slice(2)], { env: { CHROMIUM_PATH: await chromium() } })
  process.exit(code)
}
catch (error) {
  fail(error)
}
