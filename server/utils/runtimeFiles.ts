import { existsSync } from 'node:fs'
import { dirname, join, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'

/**
 * Path of something that scripts/bundle-runtime.ts laid beside the server. Found from where this code runs, never
 * from the working directory: the built server is started from anywhere.
 */
export function runtimeFile(...parts: string[]): string {
  let folder = dirname(ownFile())
  for (let up = 0; up < 8; up++) {
    const built = join(folder, 'runtime', ...parts)
    if (existsSync(built)) return built
    const beside = join(folder, '.nuxt', 'runtime', ...parts)
    if (existsSync(beside)) return beside
    folder = dirname(folder)
  }
  throw new Error(`The server's own file runtime/${parts.join('/')} is missing: build the project again`)
}

/** Where this code stands. While the built server's plugins run, Nitro gives a stand-in, and the entry file tells. */
function ownFile(): string {
  return import.meta.url === 'file:///_entry.js' ? resolve(process.argv[1] ?? '.') : fileURLToPath(import.meta.url)
}
