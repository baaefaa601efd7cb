import { fileURLToPath } from 'node:url'
import { defineConfig } from 'vitest/config'

const here = (path: string) => fileURLToPath(new URL(path, import.meta.url))
const resolve = { alias: { '#shared': here('./shared'), '~~': here('.'), '~': here('./app') } }
const served = { environment: 'node', globalSetup: ['tests/support/serverSetup.ts'], fileParallelism: false, hookTimeout: 120_000 }

export default defineConfig({
  test: {
    projects: [
      // The core and the services by themselves, and published or independent values.
      { resolve, test: { name: 'unit', environment: 'node', include: ['tests/{unit,reference}/**/*.test.ts'], testTimeout: 20_000, hookTimeout: 60_000 } },
      // The built server over HTTP; needs `npm run build` first, as the next one does.
      { resolve, test: { name: 'integration', include: ['tests/integration/**/*.test.ts'], testTimeout: 30_000, ...served } },
      // The built server in Chromium.
      { resolve, test: { name: 'browser', include: ['tests/e2e/**/*.test.ts'], testTimeout: 240_000, ...served } },
    ],
  },
})
