import { fileURLToPath } from 'node:url'
import { defineConfig } from 'vitest/config'

const here = (path: string) => fileURLToPath(new URL(path, import.meta.url))

export default defineConfig({
  resolve: { alias: { '#shared': here('./shared'), '~~': here('.'), '~': here('./app') } },
  test: {
    include: ['tests/{unit,integration,reference}/**/*.test.ts'],
    environment: 'node',
    testTimeout: 20000,
    hookTimeout: 60000,
  },
})
