import { readFileSync } from 'node:fs'
import { build } from 'esbuild'
import type { Browser, Page } from 'playwright-core'
import { launch, signInByForm, visit } from '../support/browser'
import { demo } from '../support/client'
import { startServer } from '../support/server'
import type { Figure } from './measure'
import { wavyOutline } from './outlines'

const outlines = 1000

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

async function openMap(page: Page, query = ''): Promise<number> {
  const started = performance.now()
  await page.goto(`/map${query}`)
  await page.locator('button:not([disabled])', { hasText: 'Draw a region' }).waitFor()
  const ready = performance.now() - started
  await page.waitForLoadState('networkidle')
  return ready
}

/** What a moved vertex costs before anything is painted: the outline, its faults, and the live answer. Bundled as it is, run in the page. */
const frameScript = `
import { addPlaces, beginRing, emptyDraft, finishRing, moveVertex } from './app/map/drawing/draft.ts'
import { draftOutline, faultOf } from './app/map/drawing/draftShape.ts'
import { outlineEffect } from './app/map/outlineEffect.ts'
import { loadEarthModel, withFields } from './shared/earth/earthModel.ts'
import { readFieldFile } from './shared/earth/sensitivityField.ts'
window.__frames = async (fields, ring, count) => {
  const model = withFields(loadEarthModel(), await readFieldFile(Uint8Array.from(fields), ['fingerprint']))
  let draft = { ...finishRing(addPlaces(beginRing(emptyDraft), ring)), edges: 'straight' }
  const times = []
  for (let k = 0; k < count; k++) {
    const started = performance.now()
    draft = moveVertex(draft, { ring: 0, vertex: 7 }, [ring[7][0] + 0.01 * Math.sin(k), ring[7][1] + 0.01 * Math.cos(k)])
    const outline = draftOutline(draft)
    faultOf(draft, outline, true)
    outlineEffect(outline, model)
    times.push(performance.now() - started)
  }
  return times.sort((a, b) => a - b)
}`

async function frameCost(browser: Browser): Promise<number[]> {
  const { outputFiles } = await build({ stdin: { contents: frameScript, resolveDir: process.cwd(), loader: 'ts' }, bundle: true, write: false, format: 'iife', alias: { '#shared': './shared' } })
  const page = await browser.newPage()
  await page.addScriptTag({ content: outputFiles[0]!.text })
  const ring = (wavyOutline(500, 20, 30, 8).coordinates[0] as number[][]).slice(0, -1)
  const call = `window.__frames(${JSON.stringify([...readFileSync('public/earth/fields.bin')])}, ${JSON.stringify(ring)}, 400)`
  const times = await page.evaluate<number[]>(call)
  await page.close()
  return times
}

/** The map with many outlines of 200 vertices in Chromium without a graphics processor: painted on a canvas, as there by itself, and by WebGL. */
export async function run(): Promise<Figure[]> {
  const server = await startServer()
  const browser = await launch()
  try {
    const lead = await demo(server.url, 'lead')
    const { workspaceId, agencyId } = (await lead.get('sessionRead')).memberships[0]!
    const { page } = await visit(browser, server.url)
    const cost = await frameCost(browser)
    await signInByForm(page, 'lead')
    await openMap(page)
    const few = await dragged(page)
    for (let k = 0; k < outlines; k++) {
      await lead.get('regionCreate', { params: { workspace: workspaceId }, body: { name: `Region ${k}`, kind: 'basin', agencyId: agencyId!, geometry: wavyOutline(200, -175 + 7 * (k % 50), -70 + 7 * Math.floor(k / 50), 2.5) } })
    }
    const ready = await openMap(page)
    const many = await dragged(page)
    await openMap(page, '?view=flat')
    const flat = await dragged(page)
    await openMap(page, '?painter=webgl')
    const webgl = await dragged(page)
    const middle = (gaps: number[]) => gaps[Math.floor(gaps.length / 2)]!
    return [
      { name: 'a vertex of 500 moved in Chromium, 95th percentile', value: cost[Math.floor(0.95 * cost.length)]!, unit: 'ms', note: 'outline, faults and live answer, before painting; limit 4 ms' },
      { name: `map page with ${outlines} outlines ready for use`, value: ready, unit: 'ms' },
      { name: `between frames while the globe with ${outlines} outlines is dragged, median`, value: middle(many), unit: 'ms', note: 'painted by the processor alone; limit 33.4 ms' },
      { name: 'the same, 95th percentile', value: many[Math.floor(0.95 * many.length)]!, unit: 'ms' },
      { name: 'the same on the flat view, median', value: middle(flat), unit: 'ms', note: 'limit 33.4 ms' },
      { name: 'the globe’s frames over those with the demo’s six outlines', value: middle(many) / middle(few), unit: 'times' },
      { name: 'WebGL’s frames without a graphics processor over those of the canvas', value: middle(webgl) / middle(many), unit: 'times' },
    ]
  }
  finally {
    await browser.close()
    await server.stop()
  }
}
