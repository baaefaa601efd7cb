import geodesic from 'geographiclib-geodesic'
import type { Browser, Page } from 'playwright-core'
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest'
import { light } from '../../shared/design/tokens'
import type { Position } from '../../shared/types/domain'
import { launch, open, signInByForm, visit, type Visit } from '../support/browser'
import { demo } from '../support/client'

// Outlines by each hand: what is stored has the area that GeographicLib gives (C. F. F. Karney, J. Geodesy 87, 2013), on the equator,
// over a pole and across the antimeridian.

const url = inject('url')
let browser: Browser
let lead: Visit

beforeAll(async () => {
  browser = await launch()
  lead = await visit(browser, url, { width: 900, height: 620, touch: true })
  await signInByForm(lead.page, 'lead')
})
afterAll(() => browser?.close())
afterEach(() => expect(lead.faults.splice(0)).toEqual([]))

/** Area of stored rings, km²: edges straight in longitude and latitude in short steps, what was cut at ±180° and closed at a pole taken as one. */
function geodesicAreaKm2(polygons: readonly Position[][][]): number {
  const { WGS84 } = geodesic.Geodesic
  const total = 510065621724088.44
  const seam = (from: Position, to: Position) => (Math.abs(from[0]) === 180 && from[0] === to[0]) || Math.abs(to[1]) === 90
  return polygons.flat().reduce((sum, ring) => {
    const polygon = WGS84.Polygon(false)
    const wound = ring.some(([, lat]) => Math.abs(lat) === 90)
    for (let k = 1; k < ring.length; k++) {
      const [from, to] = [ring[k - 1]!, ring[k]!]
      if (wound && seam(from, to)) continue
      const pieces = Math.max(1, Math.ceil(Math.hypot(to[0] - from[0], to[1] - from[1]) / 0.02))
      for (let p = 0; p < pieces; p++) polygon.AddPoint(from[1] + (to[1] - from[1]) * p / pieces, from[0] + (to[0] - from[0]) * p / pieces)
    }
    const area = Math.abs(polygon.Compute(false, true).area!)
    return sum + Math.min(area, total - area)
  }, 0) / 1e6
}

async function stored(name: string) {
  const client = await demo(url, 'lead')
  const { memberships } = await client.get('sessionRead')
  const { items } = await client.get('regionList', { params: { workspace: memberships[0]!.workspaceId } })
  const region = items.find(item => item.name === name)!
  const polygons = (region.geometry.type === 'Polygon' ? [region.geometry.coordinates] : region.geometry.coordinates) as Position[][][]
  return { areaKm2: region.outline.areaKm2, polygons }
}

async function begin(page: Page, view: string) {
  await open(page, `/map?view=${view}`)
  await page.getByRole('button', { name: 'Draw a region' }).click()
  await page.getByRole('button', { name: 'Snapping on' }).click()
}

async function save(page: Page, name: string) {
  await page.getByLabel('Name').fill(name)
  await page.getByRole('button', { name: 'Save region' }).click()
  await page.getByText('agrees with what was shown here').waitFor()
}

const polarBox = async (page: Page) => (await page.locator('svg[data-polar]').boundingBox())!

/** How many pixels within 7 of a point have the colour of what is drawn: the ring of a vertex has some twenty, a line beside it ten. */
async function modelPixels(page: Page, { x, y }: { x: number, y: number }): Promise<number> {
  const picture = await page.screenshot({ clip: { x: x - 7, y: y - 7, width: 15, height: 15 } })
  const pixels = await page.evaluate(async (base64) => {
    const bitmap = await createImageBitmap(new Blob([Uint8Array.from(atob(base64), c => c.charCodeAt(0))], { type: 'image/png' }))
    const pen = new OffscreenCanvas(15, 15).getContext('2d')!
    pen.drawImage(bitmap, 0, 0)
    return [...pen.getImageData(0, 0, 15, 15).data]
  }, picture.toString('base64'))
  const wanted = [1, 3, 5].map(at => Number.parseInt(light.model.slice(at, at + 2), 16))
  return Array.from({ length: 225 }, (_, k) => wanted.every((value, c) => Math.abs(pixels[4 * k + c]! - value) < 40)).filter(Boolean).length
}

describe('an outline drawn', () => {
  it('by keys on the equator, with an arrow undone on the way', async () => {
    const { page } = lead
    await begin(page, 'flat')
    const keys = async (...names: string[]) => { for (const name of names) await page.keyboard.press(name) }
    await page.locator('canvas.maplibregl-canvas').focus()
    await keys('ArrowUp', 'Enter', 'Shift+ArrowRight', 'Shift+ArrowRight', 'Enter', 'Shift+ArrowDown', 'ArrowLeft', 'Enter', 'ArrowLeft', 'ArrowLeft', 'Enter', 'Control+z', 'Shift+ArrowLeft', 'ArrowDown', 'Enter')
    await page.getByRole('button', { name: 'Finish' }).click()
    const centroid = page.locator('dl.facts > div', { has: page.locator('dt', { hasText: /^centroid$/ }) }).first().locator('dd')
    await expect.poll(() => centroid.innerText()).toMatch(/°/)
    const before = await centroid.innerText()
    await page.getByRole('button', { name: 'Move all' }).click()
    await page.locator('canvas.maplibregl-canvas').focus()
    await keys('Shift+ArrowUp')
    await expect.poll(() => centroid.innerText()).not.toBe(before)
    await save(page, 'By keys')
    const { areaKm2, polygons } = await stored('By keys')
    expect(polygons).toHaveLength(1)
    expect(Math.abs(geodesicAreaKm2(polygons) / areaKm2 - 1)).toBeLessThan(1e-6)
  })

  // The place that a click means is found by the map library; the canvas draws it by a camera of its own.
  it.each(['canvas', 'webgl'])('stands where the mouse was, painted by %s', async (painter) => {
    const { page } = lead
    await begin(page, `globe&painter=${painter}`)
    const { x, y, width, height } = (await page.locator('canvas.maplibregl-canvas').boundingBox())!
    const corners = [[-90, -70], [100, -60], [20, 90]].map(([dx, dy]) => ({ x: Math.round(x + width / 2 + dx!), y: Math.round(y + height / 2 + dy!) }))
    for (const corner of corners) {
      await page.mouse.click(corner.x, corner.y)
      await page.waitForTimeout(420)
    }
    await page.mouse.move(x + 5, y + 5)
    for (const corner of corners) await expect.poll(() => modelPixels(page, corner)).toBeGreaterThan(15)
    expect(await modelPixels(page, { x: corners[0]!.x, y: corners[0]!.y - 40 })).toBe(0)
    await page.getByRole('button', { name: 'Discard' }).click()
    await expect.poll(() => modelPixels(page, corners[0]!)).toBe(0)
  })

  it('by mouse round the South Pole, where the map’s tiles end', async () => {
    const { page } = lead
    await begin(page, 'south')
    const { x, y, width, height } = await polarBox(page)
    for (const [dx, dy] of [[-60, -40], [70, -50], [80, 60], [-70, 70]] as const) {
      await page.mouse.click(x + width / 2 + dx, y + height / 2 + dy)
      // Two clicks in one place and moment would be a double click; these are four.
      await page.waitForTimeout(420)
    }
    await page.getByRole('button', { name: 'Finish' }).click()
    // A vertex is dragged, and the figures follow.
    await page.mouse.move(x + width / 2 + 70, y + height / 2 - 50)
    await page.mouse.down()
    await page.mouse.move(x + width / 2 + 90, y + height / 2 - 60, { steps: 4 })
    await page.mouse.up()
    await save(page, 'Round the pole')
    const { areaKm2, polygons } = await stored('Round the pole')
    expect(polygons.flat(2).some(([, lat]) => lat === -90)).toBe(true)
    expect(Math.abs(geodesicAreaKm2(polygons) / areaKm2 - 1)).toBeLessThan(1e-6)
  })

  it('by touch across the antimeridian, stored in two parts', async () => {
    const { page } = lead
    await begin(page, 'north')
    const { x, y, width, height } = await polarBox(page)
    for (const [dx, dy] of [[-110, -40], [-60, -30], [-70, 45], [-130, 35]] as const) {
      await page.touchscreen.tap(x + width / 2 + dx, y + height / 2 + dy)
      await page.waitForTimeout(420)
    }
    await page.getByRole('button', { name: 'Finish' }).click()
    await save(page, 'Across the date line')
    const { areaKm2, polygons } = await stored('Across the date line')
    expect(polygons).toHaveLength(2)
    expect(polygons.flat(2).every(([lon]) => Math.abs(lon) <= 180)).toBe(true)
    expect(Math.abs(geodesicAreaKm2(polygons) / areaKm2 - 1)).toBeLessThan(1e-6)
  })

  it('is cut by the coast and simplified, each with its change shown and undone', async () => {
    const { page } = lead
    await open(page, '/map')
    await page.getByRole('button', { name: 'Bring an outline' }).click()
    await page.getByLabel(/Or paste/).fill(JSON.stringify({ type: 'Polygon', coordinates: [[[79, 5], [83, 5], [83, 9.5], [79, 9.5], [79, 5]]] }))
    await page.getByRole('button', { name: 'Show it' }).click()
    const area = page.locator('dl.facts > div', { has: page.locator('dt', { hasText: /^area$/ }) }).first().locator('dd')
    await expect.poll(() => area.innerText()).toMatch(/km²/)
    const whole = await area.innerText()
    await page.getByRole('button', { name: 'Clip to land' }).click()
    await page.getByRole('button', { name: 'Take this' }).click()
    await expect.poll(() => area.innerText()).not.toBe(whole)
    await page.getByRole('button', { name: 'Simplify' }).click()
    await page.getByText(/of \d/).waitFor()
    await page.getByRole('button', { name: 'Leave as it was' }).click()
    await page.getByRole('button', { name: 'Undo' }).click()
    await expect.poll(() => area.innerText()).toBe(whole)
    await page.getByRole('button', { name: 'Discard' }).click()
  })
})
