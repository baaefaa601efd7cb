import { cpSync, existsSync, mkdirSync, readdirSync } from 'node:fs'
import { basename, join } from 'node:path'
import { build } from 'esbuild'

interface NitroPaths { options: { dev: boolean, rootDir: string, buildDir: string, output: { serverDir: string } } }

/**
 * Lays what the server reads from disk beside the built server (`.output/server/runtime`), or beside the
 * development build: SQL migrations, workers bundled to single files, report fonts, the Earth model's fields.
 * server/utils/runtimeFiles.ts finds them again.
 */
export async function bundleRuntime(nitro: NitroPaths) {
  const { dev, rootDir, buildDir, output } = nitro.options
  const target = join(dev ? buildDir : output.serverDir, 'runtime')
  mkdirSync(target, { recursive: true })
  cpSync(join(rootDir, 'drizzle'), join(target, 'migrations'), { recursive: true })

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
    platform: 'node',
    format: 'esm',
    target: 'node20',
    banner: { js: 'import { createRequire as __createRequire } from "node:module"; const require = __createRequire(import.meta.url);' },
    logLevel: 'warning',
  })
}
