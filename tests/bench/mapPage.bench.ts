import { launch, signInByForm, visit } from '../support/browser'
import { demo } from '../support/client'
import { startServer } from '../support/server'
import type { Figure } from './measure'
import { wavyOutline } from './outlines'

const outlines = 200

/** Counts the milliseconds between frames while something goes on. */
const frames = `new Promise((done) => {
  const times = []
  const tick = (now) => { times.push(now); window.__measuring ? requestAnimationFrame(tick) : done(times.slice(1).map((t, i) => t - times[i])) }
  window.__measuring = true
  requestAnimationFrame(tick)
})`

/** The map with 200 outlines of 200 vertices in Chromium, drawn without a graphics processor. */
export async function run(): Promise<Figure[]> {
  const server = await startServer()
  const browser = await launch()
  try {
    const lead = await demo(server.url, 'lead')
    const { workspaceId, agencyId } = (await lead.get('sessionRead')).memberships[0]!
    for (let k = 0; k < outlines; k++) {
      await lead.get('regionCreate', { params: { workspace: workspaceId }, body: { name: `Region ${k}`, kind: 'basin', agencyId: agencyId!, geometry: wavyOutline(200, -170 + 17 * (k % 20), -60 + 13 * Math.floor(k / 20), 2.5) } })
    }
    const { page } = await visit(browser, server.url)
    await signInByForm(page, 'lead')
    const started = performance.now()
    await page.goto('/map')
    await page.locator('button:not([disabled])', { hasText: 'Draw a region' }).waitFor()
    const ready = performance.now() - started

    const box = (await page.locator('canvas.maplibregl-canvas').boundingBox())!
    const [x, y] = [box.x + box.width / 2, box.y + box.height / 2]
    const measured = page.evaluate<number[]>(frames)
    await page.mouse.move(x, y)
    await page.mouse.down()
    for (let i = 0; i < 60; i++) await page.mouse.move(x + 3 * i, y + 20 * Math.sin(i / 10))
    await page.mouse.up()
    await page.evaluate('window.__measuring = false')
    const gaps = (await measured).sort((a, b) => a - b)
    return [
      { name: `map page with ${outlines} outlines ready for use`, value: ready, unit: 'ms' },
      { name: 'the same dragged: median between frames', value: gaps[Math.floor(gaps.length / 2)]!, unit: 'ms', note: 'drawn by the processor alone' },
      { name: 'the same dragged: longest between frames', value: gaps.at(-1)!, unit: 'ms', note: 'drawn by the processor alone' },
    ]
  }
  finally {
    await browser.close()
    await server.stop()
  }
}
