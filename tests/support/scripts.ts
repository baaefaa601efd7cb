import { existsSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { buildDir } from './server'

const folder = join(buildDir, 'public', '_nuxt')

/** Names of the scripts that a page's HTML asks for, and of those that these import at once. */
export function scriptsOf(html: string): string[] {
  const named = [...html.matchAll(/<(?:script|link)[^>]*(?:src|href)="\/_nuxt\/([\w.-]+\.m?js)"/g)].map(match => match[1]!)
  const found = new Set<string>()
  const add = (name: string): void => {
    if (found.has(name) || !existsSync(join(folder, name))) return
    found.add(name)
    for (const [, imported] of textOf(name).matchAll(/(?:^|[;}\s])(?:import|export)\s*(?:[\w$*{}\s,]+?from\s*)?["']\.\/([^"']+)["']/g)) add(imported!)
  }
  named.forEach(add)
  return [...found]
}

export function textOf(script: string): string {
  return readFileSync(join(folder, script), 'utf8')
}
