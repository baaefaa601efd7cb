// Runs a TypeScript file under Node 20, which cannot read TypeScript itself:
//   node scripts/run-ts.mjs scripts/make-earth-model.ts [arguments]
// The file is bundled by esbuild into .cache/run-ts; packages stay imports from node_modules.
// `import.meta.url` points at the bundle, so scripts find the project by process.cwd().
import { build } from 'esbuild'
import { mkdir, rm } from 'node:fs/promises'
import { basename, join, resolve } from 'node:path'
import { fileURLToPath, pathToFileURL } from 'node:url'

const root = resolve(fileURLToPath(new URL('..', import.meta.url)))
const [entry, ...rest] = process.argv.slice(2)
if (!entry) {
  console.error('usage: node scripts/run-ts.mjs <file.ts> [arguments]')
  process.exit(2)
}

const folder = join(root, '.cache', 'run-ts')
const outfile = join(folder, `${basename(entry, '.ts')}-${process.pid}.mjs`)
await mkdir(folder, { recursive: true })
try {
  await build({
    entryPoints: [resolve(entry)],
    outfile,
    absWorkingDir: root,
    bundle: true,
    packages: 'external',
    alias: { '#shared': join(root, 'shared') },
    platform: 'node',
    format: 'esm',
    target: 'node20',
    sourcemap: 'inline',
    logLevel: 'warning'
  })
  process.argv = [process.argv[0], resolve(entry), ...rest]
  await import(pathToFileURL(outfile).href)
}
finally {
  await rm(outfile, { force: true })
}
