import { cpSync, existsSync, mkdirSync, readdirSync, writeFileSync } from 'node:fs'
import { basename, join } from 'node:path'
import { build } from 'esbuild'

interface Handler { route?: string, method?: string, middleware?: boolean }
interface NitroBuild {
  options: { dev: boolean, rootDir: string, buildDir: string, output: { serverDir: string }, handlers: Handler[] }
  scannedHandlers: Handler[]
}

/** Every route that was built in, modules' own included, so that a test can hold the contracts list against it. */
function builtRoutes({ scannedHandlers, options }: NitroBuild) {
  return [...scannedHandlers, ...options.handlers]
    .filter(handler => handler.route && !handler.middleware)
    .map(handler => ({ method: (handler.method ?? 'all').toUpperCase(), route: handler.route! }))
    .sort((a, b) => a.route < b.route ? -1 : a.route > b.route ? 1 : a.method < b.method ? -1 : 1)
}

/**
 * Lays what the server reads from disk beside the built server (`.output/server/runtime`), or beside the
 * development build: SQL migrations, workers bundled to single files, report fonts, the Earth model's fields,
 * and the table of routes.
 * server/utils/runtimeFiles.ts finds them again.
 */
export async function bundleRuntime(nitro: NitroBuild) {
  const { dev, rootDir, buildDir, output } = nitro.options
  const target = join(dev ? buildDir : output.serverDir, 'runtime')
  mkdirSync(target, { recursive: true })
  cpSync(join(rootDir, 'drizzle'), join(target, 'migrations'), { recursive: true })
  writeFileSync(join(target, 'routes.json'), `${JSON.stringify(builtRoutes(nitro), null, 1)}\n`)

  const fonts = join(rootDir, 'node_modules/@expo-google-fonts/noto-sans')
  mkdirSync(join(target, 'fonts'), { recursive: true })
  for (const file of ['400Regular/NotoSans_400Regular.ttf', '600SemiBold/NotoSans_600SemiBold.ttf', '400Regular_Italic/NotoSans_400Regular_Italic.ttf']) {
    cpSync(join(fonts, file), join(target, 'fonts', basename(file)))
  }
  const fields = join(rootDir, 'public/earth')
  if (existsSync(fields)) cpSync(fields, join(target, 'earth'), { recursive: true })

  const workers = join(rootDir, 'server/workers')
  await build({
    entryPoints: readdirSync(workers).filter(name => name.endsWith('.ts')).map(name => join(workers, name)),
    outdir: join(target, 'workers'),
    outExtension: { '.js': '.mjs' },
    bundle: true,
    alias: { '#shared': join(rootDir, 'shared') },
    // A native addon: the server imports it too (services/pictures.ts), so the build lays it where workers find it.
    external: ['@resvg/resvg-js'],
    platform: 'node',
    format: 'esm',
    target: 'node20',
    banner: { js: 'import { createRequire as __createRequire } from "node:module"; const require = __createRequire(import.meta.url);' },
    logLevel: 'warning',
  })
}
