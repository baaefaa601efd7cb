import type { Browser } from 'playwright-core'
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest'
import { accessibilityFaults, launch, open, signInByForm, visit, type Visit } from '../support/browser'
import { demo, type Client } from '../support/client'
import { makeRegion, makeScenario, square, type Place } from '../support/world'

// Work on series by hand: two regions from one table, a fit with its terms, and common ground that is settled before a run.

const url = inject('url')
let browser: Browser
let lead: Visit
let client: Client
let place: Place
const made: { id: string, name: string }[] = []

beforeAll(async () => {
  client = await demo(url, 'lead')
  const { memberships } = await client.get('sessionRead')
  const workspaceId = memberships[0]!.workspaceId
  place = { workspaceId, agencyId: (await client.get('agencyList', { params: { workspace: workspaceId } })).items[0]!.id }
  // Half of the smaller square lies on the larger one.
  for (const outline of [square(135, -25, 2), square(137, -25, 1)]) made.push(await makeRegion(client, place, 'basin', outline))
  browser = await launch()
  lead = await visit(browser, url, { width: 1100, height: 800 })
  await signInByForm(lead.page, 'lead')
})
afterAll(async () => {
  await browser?.close()
  // What other files find in the demo is what they expect there.
  for (const { id } of made) {
    const { revision } = await client.get('regionRead', { params: { id } })
    await client.get('regionRemove', { params: { id }, query: { revision } })
  }
})
afterEach(() => expect(lead.faults.splice(0)).toEqual([]))

describe('series by hand', () => {
  it('two regions take their columns of one table', async () => {
    const { page } = lead
    await open(page, '/regions/table')
    const rows = Array.from({ length: 72 }, (_, i) => `${2010 + Math.floor(i / 12)}-${String(i % 12 + 1).padStart(2, '0')}-15,${(-2 * i + 3 * Math.sin(i * i)).toFixed(2)},${(0.5 * i + Math.cos(i * i)).toFixed(2)}`)
    await page.getByLabel('The table as text').fill(`date,${made[0]!.name},${made[1]!.name}\n${rows.join('\n')}\n`)
    await expect.poll(() => page.getByLabel(`Region of the column ${made[1]!.name}`).inputValue()).toBe(made[1]!.id)
    // −2 Gt a month.
    await expect.poll(() => page.getByRole('row', { name: new RegExp(made[0]!.name) }).innerText()).toMatch(/72[\s\S]*−2[34]\.\d/)
    await page.getByLabel('Source').fill('Made by the test')
    await page.getByLabel('Reason for these versions').fill('First versions')
    await page.getByLabel('groundwater').check()
    expect(await accessibilityFaults(page)).toEqual([])
    await page.getByRole('button', { name: 'Store 2 series' }).click()
    await page.getByText('2 series are stored.').waitFor()
    expect((await client.get('regionRead', { params: { id: made[1]!.id } })).versions).toMatchObject([{ n: 1, count: 72, facts: { contains: ['groundwater'] } }])
  })

  it('a fit takes terms in and out, and its address keeps them', async () => {
    const { page } = lead
    await open(page, `/regions/${made[0]!.id}`)
    await page.getByLabel('Counted from').selectOption('first')
    await page.waitForURL(/zero=first/)
    await page.getByRole('link', { name: 'Fit this series' }).click()
    await page.getByRole('heading', { level: 1, name: /lost 2[34]\.\d.*Gt per year/ }).waitFor()
    await page.getByLabel('161-day alias').check()
    await page.getByRole('rowheader', { name: /Amplitude at 161/ }).waitFor()
    await page.waitForURL(/alias=true/)
    await open(page, new URL(page.url()).pathname + new URL(page.url()).search)
    expect(await page.getByRole('rowheader', { name: /Amplitude at 161/ }).count()).toBe(1)
    expect(await page.getByRole('columnheader', { name: 'power law' }).count()).toBe(1)
    expect(await page.locator('svg').count()).toBeGreaterThanOrEqual(3)
    expect(await accessibilityFaults(page)).toEqual([])
  })

  it('common ground is settled before a run, and the result says how', async () => {
    const { page } = lead
    const choices = await Promise.all(made.map(async ({ id }) => ({ regionId: id, versionId: (await client.get('regionRead', { params: { id } })).versions[0]!.id, scale: 1 })))
    const scenario = await makeScenario(client, place, choices)
    await open(page, `/scenarios/${scenario.id}`)
    const run = page.getByRole('button', { name: /^(Save and run|Run)$/ })
    await expect.poll(() => run.isDisabled()).toBe(true)
    await page.getByLabel(`Take ${made[1]!.name} off ${made[0]!.name}`).check()
    await expect.poll(() => run.isEnabled()).toBe(true)
    await run.click()
    await page.waitForURL(/\/runs\/\w{26}/, { timeout: 60_000 })
    await page.getByText(/^Counted once: what the series of/).first().waitFor()
    await page.getByRole('rowheader', { name: /Counted once/ }).waitFor()
    await client.get('scenarioRemove', { params: { id: scenario.id }, query: { revision: (await client.get('scenarioRead', { params: { id: scenario.id } })).revision } })
  })
})
