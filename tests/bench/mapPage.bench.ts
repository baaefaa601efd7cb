import type { Page } from 'playwright-core'
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

/** Drags the map and gives the milliseconds between frames, shortest first. */
async function dragged(page: Page): Promise<number[]> {
  const box = (await page.locator('canvas.maplibregl-canvas').boundingBox())!
  const [x, y] = [box.x + box.width / 2, box.y + box.height / 2]
  const measured = page.evaluate<number[]>(frames)
  await page.mouse.move(x, y)
  await page.mouse.down()
  for (let i = 0; i < 60; i++) {
    await page.mouse.move(x + 3 * i, y + 20 * Math.sin(i / 10))
    await page.waitForTimeout(16)
  }
  await page.mouse.up()
  await page.evaluate('window.__measuring = false')
  return (await measured).sort((a, b) => a - b)
}

async function openMap(page: Page): Promise<number> {
  const started = performance.now()
  await page.goto('/map')
  await page.locator('button:not([disabled])', { hasText: 'Draw a region' }).waitFor()
  const ready = performance.now() - started
  await page.waitForLoadState('networkidle')
  return ready
}

/**
 * The map with 200 outlines of 200 vertices in Chromium, beside the demo's six. Without a graphics processor the globe
 * itself takes most of a frame; what the outlines add is the ratio of the two.
 */
export async function run(): Promise<Figure[]> {
  const server = await startServer()
  const browser = await launch()
  try {
    const lead = await demo(server.url, 'lead')
    const { workspaceId, agencyId } = (await lead.get('sessionRead')).memberships[0]!
    const { page } = await visit(browser, server.url)
    await signInByForm(page, 'lead')
    await openMap(page)
    const few = await dragged(page)
    for (let k = 0; k < outlines; k++) {
      await lead.get('regionCreate', { params: { workspace: workspaceId }, body: { name: `Region ${k}`, kind: 'basin', agencyId: agencyId!, geometry: wavyOutline(200, -170 + 17 * (k % 20), -60 + 13 * Math.floor(k / 20), 2.5) } })
    }
    const ready = await openMap(page)
    const many = await dragged(page)
    const middle = (gaps: number[]) => gaps[Math.floor(gaps.length / 2)]!
    return [
      { name: `map page with ${outlines} outlines ready for use`, value: ready, unit: 'ms' },
      { name: `between frames while ${outlines} outlines are dragged, median`, value: middle(many), unit: 'ms', note: 'drawn by the processor alone' },
      { name: 'the same over that with the demo’s six outlines', value: middle(many) / middle(few), unit: 'times' },
    ]
  }
  finally {
    await browser.close()
    await server.stop()
  }
}
