// After an install: the generated types and lint configuration that editors, lint and type checks need.
import { spawnSync } from 'node:child_process'
import { existsSync } from 'node:fs'

if (existsSync('node_modules/.bin/nuxt') && !process.env.COUNTERPOISE_SKIP_PREPARE) {
  const { status } = spawnSync('node_modules/.bin/nuxt', ['prepare'], { stdio: 'inherit' })
  process.exit(status ?? 1)
}
