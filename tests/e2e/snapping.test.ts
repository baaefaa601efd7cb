import { readFileSync } from 'node:fs'
import { area, featureCollection, intersect, polygon } from '@turf/turf'
import type { MultiPolygon } from 'geojson'
import type { Browser, Page } from 'playwright-core'
import { feature } from 'topojson-client'
import type { GeometryCollection, Topology } from 'topojson-specification'
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest'
import type { Position } from '../../shared/types/domain'
import { launch, open, signInByForm, visit, type Visit } from '../support/browser'
import { demo } from '../support/client'

// A region drawn by mouse beside another one: its corner, its border and the coast are met where they are, to the last digit, and by Alt none.
// The coast is Natural Earth's own (world-atlas), what is shared is measured by turf.

const url = inject('url')
let browser: Browser
let lead: Visit

beforeAll(async () => {
  browser = await launch()
  lead = await visit(browser, url, { width: 1000, height: 620 })
  await signInByForm(lead.page, 'lead')
})
afterAll(() => browser?.close())
afterEach(() => expect(lead.faults.splice(0)).toEqual([]))

const [west, south, east, north] = [120.1234567, -28.0345678, 130.0567891, -22.0678912]
const neighbour: Position[][] = [[[west, south], [east, south], [east, north], [west, north], [west, south]]]
const atlas = JSON.parse(readFileSync('node_modules/world-atlas/land-50m.json', 'utf8')) as Topology<{ land: GeometryCollection }>
const coast = feature(atlas, atlas.objects.land).features.flatMap(({ geometry }) => (geometry as MultiPolygon).coordinates.flat(2)) as Position[]
const nearest = (to: Position): Position => coast.reduce((best, place) => Math.hypot(place[0] - to[0], place[1] - to[1]) < Math.hypot(best[0] - to[0], best[1] - to[1]) ? place : best)

/** The vertices so far, as the browser keeps them against a closed tab. */
async function kept(page: Page): Promise<Position[]> {
  const text = await page.evaluate(() => Object.entries(localStorage).find(([key]) => key.startsWith('counterpoise.outline.'))?.[1] ?? '')
  return text ? (JSON.parse(text) as { draft: { rings: Position[][] } }).draft.rings.at(-1) ?? [] : []
}

async function click(page: Page, [x, y]: readonly [number, number], free = false): Promise<Position> {
  const before = await kept(page)
  if (free) await page.keyboard.down('Alt')
  await page.mouse.click(x, y)
  if (free) await page.keyboard.up('Alt')
  await expect.poll(() => kept(page)).not.toEqual(before)
  return (await kept(page)).at(-1)!
}

/** Mercator's northing, degrees. */
const northing = (lat: number) => Math.log(Math.tan(Math.PI / 4 + lat * Math.PI / 360)) * 180 / Math.PI

/** Where places are on the flat map, from two that were clicked freely and are taken back. */
async function screenOf(page: Page): Promise<(place: Position) => [number, number]> {
  const { x, y, width, height } = (await page.locator('canvas.maplibregl-canvas').boundingBox())!
  const [middleX, middleY] = [Math.round(x + width / 2), Math.round(y + height / 2)]
  const [p, q] = [[middleX - 150, middleY - 120], [middleX + 150, middleY + 120]] as [[number, number], [number, number]]
  const [a, b] = [await click(page, p, true), await click(page, q, true)]
  const undo = page.getByRole('button', { name: 'Undo' })
  await undo.click()
  await undo.click()
  await expect.poll(() => undo.isDisabled()).toBe(true)
  const [perLon, perNorth] = [(q[0] - p[0]) / (b[0] - a[0]), (q[1] - p[1]) / (northing(b[1]) - northing(a[1]))]
  return ([lon, lat]) => [p[0] + perLon * (lon - a[0]), p[1] + perNorth * (northing(lat) - northing(a[1]))]
}

describe('a vertex that is set by mouse', () => {
  it('snaps to a neighbour’s corner, to its border and to the coast, and with Alt to nothing', async () => {
    const client = await demo(url, 'lead')
    const { memberships } = await client.get('sessionRead')
    const { workspaceId, agencyId } = memberships[0]!
    const params = { workspace: workspaceId }
    const agency = agencyId ?? (await client.get('agencyList', { params })).items[0]!.id
    const beside = await client.get('regionCreate', { params, body: { name: 'Beside', kind: 'basin', agencyId: agency, geometry: { type: 'Polygon', coordinates: neighbour } } })

    const { page } = lead
    await open(page, `/map?view=flat&region=${beside.id}`)
    await page.getByRole('button', { name: 'All regions' }).click()
    await page.getByRole('button', { name: 'Draw a region' }).click()
    const screen = await screenOf(page)
    const near = (place: Position, dx: number, dy: number): [number, number] => [Math.round(screen(place)[0]) + dx, Math.round(screen(place)[1]) + dy]
    const words = (wanted: string) => page.getByText(wanted, { exact: true }).first().waitFor()

    await page.mouse.move(...near([west, south], -5, 4))
    await words('on a corner of Beside')
    expect(await click(page, near([west, south], -5, 4))).toEqual([west, south])
    // Set on the border, the way there follows it round the corner.
    await page.mouse.move(...near([125, north], 0, -6))
    await words('on the border of Beside')
    const onBorder = await click(page, near([125, north], 0, -6))
    expect(onBorder[1]).toBe(north)
    expect(Math.abs(onBorder[0] - 125)).toBeLessThan(0.2)
    expect(await kept(page)).toContainEqual([west, north])

    const [cape, bay] = [nearest([121.49, -19.11]), nearest([118.75, -20.26])]
    await page.mouse.move(...near(cape, 1, -1))
    await words('on the coast')
    const onCoast = await click(page, near(cape, 1, -1))
    // One of the coast's own vertices, which lie a few pixels apart here; land ships in steps of a ten-thousandth of a degree.
    const vertex = nearest(onCoast)
    expect(Math.max(Math.abs(onCoast[0] - vertex[0]), Math.abs(onCoast[1] - vertex[1]))).toBeLessThan(0.6e-4)
    expect(Math.hypot(onCoast[0] - cape[0], onCoast[1] - cape[1])).toBeLessThan(0.5)
    const free = await click(page, near(bay, -4, -4), true)
    expect(Math.hypot(free[0] - bay[0], free[1] - bay[1])).toBeLessThan(0.6)
    expect(Math.hypot(free[0] - nearest(free)[0], free[1] - nearest(free)[1])).toBeGreaterThan(0.001)

    await page.getByRole('button', { name: 'Finish' }).click()
    await page.getByLabel('Name').fill('Snapped')
    await page.getByRole('button', { name: 'Save region' }).click()
    await page.getByText('agrees with what was shown here').waitFor()
    const stored = (await client.get('regionList', { params })).items.find(item => item.name === 'Snapped')!
    const { coordinates } = stored.geometry as { coordinates: Position[][] }
    for (const place of [[west, south], [west, north], onBorder, onCoast, free]) expect(coordinates[0]).toContainEqual(place)
    const shared = intersect(featureCollection([polygon(coordinates), polygon(neighbour)]))
    expect((shared ? area(shared) : 0) / area(polygon(coordinates))).toBeLessThan(1e-9)
    await client.get('regionRemoveMany', { params, body: { regions: [beside, stored].map(({ id, revision }) => ({ id, revision })) } })
  })
})
