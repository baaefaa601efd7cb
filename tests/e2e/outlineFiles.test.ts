import { readFileSync } from 'node:fs'
import type { Browser, Page } from 'playwright-core'
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest'
import { accessibilityFaults, launch, open, signInByForm, visit, type Visit } from '../support/browser'
import { Client, demo } from '../support/client'
import { square } from '../support/world'

// Files with several outlines on the map, and a person's own account.

const url = inject('url')
let browser: Browser
let lead: Visit

beforeAll(async () => {
  browser = await launch()
  lead = await visit(browser, url, { width: 900, height: 600 })
  await signInByForm(lead.page, 'lead')
})
afterAll(() => browser?.close())
afterEach(() => expect(lead.faults.splice(0)).toEqual([]))

async function account() {
  const client = await demo(url, 'lead')
  const workspace = (await client.get('sessionRead')).memberships[0]!.workspaceId
  return { workspace, names: (await client.get('regionList', { params: { workspace } })).items.map(region => region.name) }
}
const feature = (properties: object, geometry: object) => ({ type: 'Feature', properties, geometry })
const crossed = { type: 'Polygon', coordinates: [[[0, 0], [1, 1], [1, 0], [0, 1], [0, 0]]] }
const several = {
  type: 'FeatureCollection',
  features: [
    feature({ name: 'Orla', code: 'OR-1' }, square(-150, 40)), feature({ name: 'Orla', code: 'OR-2' }, square(-149, 40)),
    feature({ name: 'Vesk', code: 'VE-1' }, square(-140, 40)), feature({ name: 'Bad one', code: 'X' }, crossed),
  ],
}
async function bring(page: Page, file: Parameters<ReturnType<Page['locator']>['setInputFiles']>[0]) {
  await page.getByRole('button', { name: 'Bring an outline' }).click()
  await page.getByLabel(/zipped shapefile/).setInputFiles(file)
}

describe('a file with several outlines', () => {
  it('is a list to name, tick and store together, and is taken back together', async () => {
    const { page } = lead
    const before = await account()
    await open(page, '/map')
    await bring(page, { name: 'basins.geojson', mimeType: 'application/geo+json', buffer: Buffer.from(JSON.stringify(several)) })
    await page.getByRole('heading', { name: 'three outlines in the file' }).waitFor()
    await page.getByText('Bad one').waitFor()
    await page.getByText(/Shares .* of it, with Orla \(2\)/).waitFor()
    expect(await accessibilityFaults(page)).toEqual([])
    await page.getByLabel('Names from').selectOption('code')
    await page.getByLabel('Take VE-1').uncheck()
    await page.getByLabel('Name of OR-2').fill('OR-1')
    await expect.poll(() => page.getByRole('button', { name: 'Store 2 regions' }).isEnabled()).toBe(false)
    await page.getByLabel('Name of OR-1').nth(1).fill('Lower Orla')
    await page.getByRole('button', { name: 'Store 2 regions' }).click()
    await page.getByText('Stored two regions: OR-1 and Lower Orla.').waitFor()
    expect((await account()).names.sort()).toEqual([...before.names, 'Lower Orla', 'OR-1'].sort())
    await page.getByRole('button', { name: 'Undo: put them in the bin' }).click()
    await expect.poll(async () => (await account()).names.sort()).toEqual(before.names.sort())
  })

  it('leaves as a GeoPackage that comes back with every region under a name of its own', async () => {
    const { page } = lead
    const { names } = await account()
    const [download] = await Promise.all([page.waitForEvent('download'), page.getByRole('button', { name: 'GeoPackage' }).click()])
    const bytes = readFileSync((await download.path())!)
    expect(bytes.subarray(68, 72).toString('latin1')).toBe('GPKG')
    await bring(page, { name: download.suggestedFilename(), mimeType: 'application/geopackage+sqlite3', buffer: bytes })
    await page.getByLabel(`Name of ${names[0]} (2)`, { exact: true }).waitFor()
    expect(await page.getByRole('checkbox', { name: /^Take / }).count()).toBe(names.length)
    await page.getByRole('button', { name: 'Cancel' }).click()
  })

  it('in a system that is not known is refused by its name', async () => {
    const { page } = lead
    await bring(page, 'tests/fixtures/outlines/shapefile-bern.zip')
    await page.getByText(/CH1903_LV03.*datum/).waitFor()
    await page.getByRole('button', { name: 'Cancel' }).click()
  })
})

describe('one’s own account', () => {
  it('makes a token that works until it is revoked', async () => {
    const { page } = lead
    const { workspace } = await account()
    await open(page, '/account')
    await page.getByLabel('What it is for').fill('browser test')
    await page.getByRole('button', { name: 'Make a token' }).click()
    const secret = await page.getByLabel(/The secret of “browser test”/).inputValue()
    const call = { params: { workspace }, headers: { authorization: `Bearer ${secret}` } }
    await new Client(url).get('regionList', call)
    await page.getByRole('button', { name: 'Revoke browser test' }).click()
    await page.getByRole('button', { name: 'Revoke', exact: true }).click()
    await page.getByRole('button', { name: 'Revoke browser test' }).waitFor({ state: 'hidden' })
    await new Client(url).refused('regionList', 401, call)
  })
})
