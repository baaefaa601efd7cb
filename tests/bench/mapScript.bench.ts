import { existsSync, readFileSync, statSync } from 'node:fs'
import { join } from 'node:path'
import { launch, signInByForm, visit } from '../support/browser'
import { buildDir, startServer } from '../support/server'
import type { Figure } from './measure'

const folder = join(buildDir, 'public', '_nuxt')

/** Bytes of a script as it is sent; the smallest are not worth packing. */
function sentBytes(script: string, packing: 'gz' | 'br'): number {
  const packed = join(folder, `${script}.${packing}`)
  return statSync(existsSync(packed) ? packed : join(folder, script)).size
}
const kb = (scripts: readonly string[], packing: 'gz' | 'br') => scripts.reduce((sum, script) => sum + sentBytes(script, packing), 0) / 1000

interface Loaded { scripts: string[], text: number, startOf: Record<string, number> }
const read = `({
  text: performance.getEntriesByName('first-contentful-paint')[0]?.startTime ?? 0,
  startOf: Object.fromEntries(performance.getEntriesByType('resource').filter(r => /\\.m?js$/.test(r.name)).map(r => [r.name.split('/').pop(), r.startTime])),
})`

/**
 * The scripts of the map page before anybody touches it, in Chromium, less those that a plain page loads as well. Links may not fetch the
 * pages behind them ahead, which they do on every page alike.
 */
export async function run(): Promise<Figure[]> {
  const server = await startServer()
  const browser = await launch()
  try {
    const { page, context } = await visit(browser, server.url, { width: 1000, height: 600 })
    await context.addInitScript('Object.defineProperty(navigator, "connection", { value: { saveData: true } })')
    const cold = async (path: string, standing: string): Promise<Loaded> => {
      const scripts = new Set<string>()
      const fresh = await context.newPage()
      fresh.on('request', request => /\/_nuxt\/.*\.m?js$/.test(request.url()) && scripts.add(request.url().split('/').pop()!))
      await fresh.goto(path)
      await fresh.locator(standing).first().waitFor()
      await fresh.waitForLoadState('networkidle')
      await fresh.waitForTimeout(2000)
      const { text, startOf } = await fresh.evaluate<Omit<Loaded, 'scripts'>>(read)
      await fresh.close()
      return { scripts: [...new Set([...scripts, ...Object.keys(startOf)])], text, startOf }
    }
    const open = await cold('/sign-in', 'button:not([disabled])')
    await signInByForm(page, 'lead')
    const plain = await cold('/account', 'h1')
    const map = await cold('/map', 'button:not([disabled]):has-text("Draw a region")')
    const extra = map.scripts.filter(script => !plain.scripts.includes(script))
    const library = extra.filter(script => readFileSync(join(folder, script), 'utf8').includes('maplibregl-canvas'))
    const worker = extra.filter(script => script.includes('worker'))
    const own = extra.filter(script => !library.includes(script) && !worker.includes(script))
    const both = [...own, ...library]
    return [
      { name: 'scripts of a page that everybody sees, gzip', value: kb(open.scripts, 'gz'), unit: 'KB', note: `sign-in, all that it loads; Brotli ${kb(open.scripts, 'br').toFixed(0)} KB` },
      { name: 'scripts of the map page, own and library, Brotli', value: kb(both, 'br'), unit: 'KB', note: `as browsers get them, before anything is touched, beyond those of a plain page; own ${kb(own, 'br').toFixed(0)} KB; limit 350 KB` },
      { name: 'the same by gzip', value: kb(both, 'gz'), unit: 'KB', note: `own ${kb(own, 'gz').toFixed(0)} KB; limit 350 KB` },
      { name: 'the map library’s worker, a file of its own, Brotli', value: kb(worker, 'br'), unit: 'KB', note: `gzip ${kb(worker, 'gz').toFixed(0)} KB` },
      { name: 'map library asked for after the first text is painted', value: Math.min(...library.map(script => map.startOf[script] ?? 0)) - map.text, unit: 'ms', note: 'must not be negative' },
    ]
  }
  finally {
    await browser.close()
    await server.stop()
  }
}
