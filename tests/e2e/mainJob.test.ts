import { readFileSync } from 'node:fs'
import type { Browser, Page } from 'playwright-core'
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest'
import { launch, open, signInByForm, visit, type Visit } from '../support/browser'
import { demo } from '../support/client'
import { monthlyCsv, square } from '../support/world'

// The main job by hand: outline → mass series → scenario → run → report → publication → public page.

const url = inject('url')
let browser: Browser
let lead: Visit

beforeAll(async () => {
  browser = await launch()
  // A small window: without a graphics processor the map is drawn pixel by pixel.
  lead = await visit(browser, url, { width: 1000, height: 600 })
  await signInByForm(lead.page, 'lead')
})
afterAll(() => browser?.close())
afterEach(() => expect(lead.faults.splice(0)).toEqual([]))

/** What stands in a list of facts beside a name. */
const fact = (page: Page, name: string) => page.locator('dl.facts > div', { has: page.locator('dt', { hasText: new RegExp(`^${name}$`) }) }).locator('dd').first()
const regionsOfDemo = async () => {
  const client = await demo(url, 'lead')
  const { memberships } = await client.get('sessionRead')
  return (await client.get('regionList', { params: { workspace: memberships[0]!.workspaceId } })).items
}

describe('on the map', () => {
  it('a region is drawn by hand, its figures follow, and it is saved', async () => {
    const { page } = lead
    await open(page, '/map')
    await page.getByRole('button', { name: 'Draw a region' }).click()
    const { x, y, width, height } = (await page.locator('canvas.maplibregl-canvas').boundingBox())!
    const finish = page.getByRole('button', { name: 'Finish' })
    for (const [dx, dy] of [[-60, -50], [60, -50], [70, 40], [-50, 60]] as const) await page.mouse.click(x + width / 2 + dx, y + height / 2 + dy)
    await expect.poll(() => finish.isEnabled()).toBe(true)
    await finish.click()
    await expect.poll(() => fact(page, 'area').innerText()).toMatch(/km²/)
    await expect.poll(() => fact(page, 'length of day').innerText()).toMatch(/µs/)
    const before = await fact(page, 'area').innerText()
    await page.getByRole('button', { name: 'Undo' }).click()
    await page.getByRole('button', { name: 'Redo' }).click()
    await expect.poll(() => fact(page, 'area').innerText()).toBe(before)
    await page.getByLabel('Name').fill('Drawn by hand')
    await page.getByLabel('Kind').selectOption('basin')
    await page.getByRole('button', { name: 'Save region' }).click()
    await page.getByRole('heading', { name: /Drawn by hand/ }).waitFor()
    const stored = (await regionsOfDemo()).find(region => region.name === 'Drawn by hand')!
    expect(stored.kind).toBe('basin')
    // Great-circle edges are stored in steps of at most 0.25°, so there are many more than four.
    expect((stored.geometry.coordinates as number[][][])[0]!.length).toBeGreaterThan(20)
    // What the browser showed is what the server found: the shown area has its digits.
    const shown = Number(before.replace(/[^\d.]/g, ''))
    expect(Math.abs(stored.outline.areaKm2 / shown - 1)).toBeLessThan(0.01)
  })

  it('an outline that crosses itself says so and cannot be saved; a file that holds one outline is brought in', async () => {
    const { page } = lead
    await open(page, '/map')
    await page.getByRole('button', { name: 'Bring an outline' }).click()
    await page.getByLabel(/Or paste/).fill(JSON.stringify({ type: 'Polygon', coordinates: [[[0, 0], [10, 10], [10, 0], [0, 10], [0, 0]]] }))
    await page.getByRole('button', { name: 'Show it' }).click()
    await page.getByText(/cross/i).first().waitFor()
    await page.getByLabel(/zipped shapefile/).setInputFiles({ name: 'aquifer.geojson', mimeType: 'application/geo+json', buffer: Buffer.from(JSON.stringify(square(24, -21, 2))) })
    await page.getByLabel('Name').fill('Brought by file')
    await page.getByLabel('Kind').selectOption('aquifer')
    await page.getByRole('button', { name: 'Save region' }).click()
    await page.getByRole('link', { name: 'Open region' }).waitFor()
    expect((await regionsOfDemo()).find(region => region.name === 'Brought by file')!.geometry).toEqual(square(24, -21, 2))
  })
})

describe('from a series to the public page', () => {
  it('a mass series is uploaded; a bad row is listed and left out when the person says so', async () => {
    const { page } = lead
    await page.getByRole('link', { name: 'Open region' }).click()
    await page.getByRole('link', { name: 'Add a mass series' }).click()
    const csv = monthlyCsv(12, -18, 12).replace('2010-06-15,', '2010-06-31,')
    await page.locator('input[type=file]').setInputFiles({ name: 'aquifer.csv', mimeType: 'text/csv', buffer: Buffer.from(csv) })
    await page.getByRole('heading', { level: 1, name: /143 of 144 rows can be used/ }).waitFor()
    await page.getByRole('heading', { name: 'Rows that cannot be used' }).waitFor()
    await page.getByLabel('Source', { exact: true }).fill('Made by the test')
    await page.getByRole('button', { name: 'Leave out this row and store' }).click()
    await page.getByText(/Version 1 is stored: 143 values, 1 rows? left out/).waitFor()
    await expect.poll(() => page.locator('h1').innerText()).toMatch(/Brought by file/)
  })

  it('a scenario is made of it and run, and its result opens', async () => {
    const { page } = lead
    await page.getByRole('link', { name: 'Scenarios' }).click()
    await page.getByRole('button', { name: 'New scenario' }).click()
    const dialog = page.getByRole('dialog')
    await dialog.getByLabel('Name').fill('Made by hand')
    await dialog.getByRole('button', { name: 'Make it' }).click()
    await page.waitForURL(/\/scenarios\/\w{26}$/)
    await page.getByRole('button', { name: 'Run', exact: true }).click()
    await page.waitForURL(/\/runs\/\w{26}/, { timeout: 60_000 })
    await expect.poll(() => page.locator('h1').innerText()).toMatch(/is calculated to (lengthen|shorten) the day by .*±.*µs per year/)
    await page.getByRole('table').first().waitFor()
    expect(await page.getByRole('row', { name: /Brought by file/ }).count()).toBeGreaterThan(0)
    expect(await page.locator('svg').count()).toBeGreaterThan(3)
  })

  it('the report comes down as a PDF', async () => {
    const { page } = lead
    const [download] = await Promise.all([page.waitForEvent('download'), page.getByRole('link', { name: 'Export report' }).click()])
    expect(download.suggestedFilename()).toMatch(/\.pdf$/)
    expect(readFileSync(await download.path()).subarray(0, 5).toString()).toBe('%PDF-')
  })

  it('the run is published, and anybody reads the page, with and without scripts', async () => {
    const { page } = lead
    const sentence = await page.locator('h1').innerText()
    await page.getByRole('button', { name: /Publish edition/ }).click()
    const dialog = page.getByRole('dialog')
    await dialog.getByLabel('Title').fill('Published by hand')
    await dialog.getByRole('button', { name: 'Publish edition 1' }).click()
    await dialog.getByText(/is open to everybody/).waitFor()
    const path = (await dialog.getByRole('link').first().getAttribute('href'))!
    expect(path).toBe('/p/published-by-hand')
    await dialog.getByRole('button', { name: 'Close' }).click()

    const anybody = await visit(browser, url)
    await open(anybody.page, path)
    expect(await anybody.page.locator('h1').innerText()).toBe(sentence)
    await anybody.page.getByRole('heading', { name: 'Cautions' }).waitFor()
    await anybody.page.getByText('Invented data').first().waitFor()
    const [download] = await Promise.all([anybody.page.waitForEvent('download'), anybody.page.getByRole('link', { name: /budget/i }).first().click()])
    expect(readFileSync(await download.path(), 'utf8')).toContain('Brought by file')
    expect(anybody.faults).toEqual([])
    await anybody.close()

    const plain = await browser.newContext({ baseURL: url, javaScriptEnabled: false })
    const still = await plain.newPage()
    await still.goto(path)
    expect(await still.locator('h1').innerText()).toBe(sentence)
    expect(await still.locator('svg').count()).toBeGreaterThan(3)
    await plain.close()
  })
})

describe('people', () => {
  it.each([
    ['admin', ['People']],
    ['hydrologist', ['Map', 'Regions', 'Scenarios']],
    ['glaciologist', ['Map', 'Regions', 'Scenarios']],
    ['reader', ['Map', 'Regions', 'Scenarios']],
  ])('%s signs in, finds their part, and signs out', async (mailbox, links) => {
    const someone = await visit(browser, url)
    await signInByForm(someone.page, mailbox)
    for (const name of links) await someone.page.getByRole('navigation', { name: 'Main' }).getByRole('link', { name, exact: true }).waitFor()
    await someone.page.getByRole('button', { name: 'Sign out' }).click()
    await someone.page.getByRole('link', { name: 'Sign in' }).first().waitFor()
    await open(someone.page, '/regions')
    expect(new URL(someone.page.url()).pathname).toBe('/sign-in')
    expect(someone.faults).toEqual([])
    await someone.close()
  })

  it('a wrong password is told, and what was typed stays', async () => {
    const someone = await visit(browser, url)
    await open(someone.page, '/sign-in')
    await someone.page.getByLabel('E-mail').fill('reader@demo.example')
    await someone.page.getByLabel('Password').fill('not the password')
    await someone.page.getByRole('button', { name: 'Sign in' }).click()
    await someone.page.getByRole('alert').getByText('E-mail or password is wrong.').waitFor()
    expect(await someone.page.getByLabel('E-mail').inputValue()).toBe('reader@demo.example')
    // The browser itself reports the refused request; nothing else may be there.
    expect(someone.faults.filter(fault => !/status of 401/.test(fault))).toEqual([])
    await someone.close()
  })

  it('a region that somebody else changed meanwhile is not overwritten, and what was typed stays', async () => {
    const hydrologist = await visit(browser, url)
    await signInByForm(hydrologist.page, 'hydrologist')
    const region = (await regionsOfDemo()).find(r => r.name === 'Brought by file')!
    await open(hydrologist.page, `/regions/${region.id}`)
    await hydrologist.page.getByRole('button', { name: /Edit|Rename|Change/ }).first().click()
    await hydrologist.page.getByLabel('Note').first().fill('What I typed')
    const other = await demo(url, 'lead')
    await other.get('regionChange', { params: { id: region.id }, body: { revision: region.revision, note: 'What they typed' } })
    await hydrologist.page.getByRole('button', { name: /^Save/ }).first().click()
    await hydrologist.page.getByText(/changed (this|it|the region) meanwhile/i).first().waitFor()
    expect(await hydrologist.page.getByLabel('Note').first().inputValue()).toBe('What I typed')
    expect((await other.get('regionRead', { params: { id: region.id } })).note).toBe('What they typed')
    expect(hydrologist.faults.filter(fault => !/status of 409/.test(fault))).toEqual([])
    await hydrologist.close()
  })
})
