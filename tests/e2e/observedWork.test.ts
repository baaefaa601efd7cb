import type { Browser } from 'playwright-core'
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest'
import { launch, open, signInByForm, visit, type Visit } from '../support/browser'
import { demo, type Client } from '../support/client'

// The observer's work by hand: gravity coefficients with their questions → a reduction under a name → a run held against it.

const url = inject('url')
let browser: Browser
let lead: Visit
let client: Client
let workspace: string

beforeAll(async () => {
  browser = await launch()
  lead = await visit(browser, url, { width: 1000, height: 700 })
  await signInByForm(lead.page, 'lead')
  client = await demo(url, 'lead')
  workspace = (await client.get('sessionRead')).memberships[0]!.workspaceId
})
afterAll(() => browser?.close())
afterEach(() => expect(lead.faults.splice(0)).toEqual([]))

const observedOf = async (format: string) => (await client.get('observedList', { params: { workspace } })).items.find(item => item.format === format)!

describe('observed rotation', () => {
  it('takes gravity coefficients once their questions are answered, and shows what they stand for', async () => {
    const { page } = lead
    await open(page, '/observations')
    await page.getByRole('button', { name: 'Add a series' }).click()
    const rows = Array.from({ length: 60 }, (_, i) => `${2010 + Math.floor(i / 12)}-${String(i % 12 + 1).padStart(2, '0')}-15,${(-2e-12 * i).toExponential(3)},1e-12,2e-12`)
    await page.getByLabel('A file').first().setInputFiles({ name: 'by-hand.csv', mimeType: 'text/csv', buffer: Buffer.from(`date,dC20,dC21,dS21\n${rows.join('\n')}\n`) })
    await page.getByText('Read as gravity coefficients of degree two').waitFor()
    const store = page.getByRole('button', { name: 'Store these coefficients' })
    expect(await store.isDisabled()).toBe(true)
    await page.getByLabel('Was the pole tide of the solid Earth removed?').selectOption('removed')
    await page.getByLabel('Was the pole tide of the ocean removed?').selectOption('in')
    await page.getByLabel(/Which permanent tide/).selectOption('zero-tide')
    await page.getByLabel(/Which mean pole/).selectOption('secular-2018')
    await page.getByLabel(/reference radius/).fill('6378136.3')
    await page.getByLabel(/dealiasing product/).selectOption('restored')
    await page.getByLabel('Name', { exact: true }).fill('Coefficients by hand')
    await store.click()
    await page.getByRole('heading', { name: /Coefficients by hand holds gravity coefficients/ }).waitFor()
    await page.getByText('it counts twice').waitFor()
    await page.getByRole('heading', { name: 'From gravity to excitation' }).waitFor()
    // Out of the way of whoever opens the newest series.
    const { id, revision } = (await client.get('observedList', { params: { workspace } })).items.find(item => item.name === 'Coefficients by hand')!
    await client.get('observedRemove', { params: { id }, query: { revision } })
  })

  it('is reduced by a chain that is kept under a name', async () => {
    const { page } = lead
    await open(page, `/observations/${(await observedOf('csv')).id}/reduction`)
    await page.getByText('Dotted: the secular pole').waitFor()
    await page.getByRole('button', { name: 'Keep this chain under a name…' }).click()
    await page.getByRole('dialog').getByLabel('Name').fill('Kept by hand')
    await page.getByRole('button', { name: 'Keep it' }).click()
    await page.getByRole('row', { name: /Kept by hand.*in use here/ }).waitFor()
  })

  it('is held against a run: chosen by name, stated beside the trends, and attributed to regions taken together', async () => {
    const { page } = lead
    const scenario = (await client.get('scenarioList', { params: { workspace } })).items.find(item => item.latestRun)!
    await open(page, `/runs/${scenario.latestRun!.id}?observed=${(await observedOf('csv')).id}`)
    await page.getByLabel('reduced by').locator('option', { hasText: 'Tides, air and sea out' }).waitFor({ state: 'attached' })
    await page.getByLabel('reduced by').selectOption({ label: 'Tides, air and sea out' })
    await page.getByText('the chain “Tides, air and sea out”').waitFor()
    await page.getByRole('link', { name: /could rotation tell them apart/ }).click()
    await page.getByText('reduced by “Tides, air and sea out”').waitFor()
    await page.getByText('Take regions together, give each its own prior').click()
    for (const ice of ['Northern ice dome', 'Southern ice margin', 'Corran glaciers']) await page.getByLabel(`Group of ${ice}`).fill('All ice')
    await page.getByLabel('Prior one-sigma of All ice').fill('0.1')
    await page.getByRole('button', { name: 'Estimate with these' }).click()
    await page.getByRole('region', { name: 'Factors' }).getByRole('row', { name: /All ice.*1\.00 ± 0\.10/ }).waitFor()
    expect(new URL(page.url()).searchParams.get('groups')).toContain('"name":"All ice"')
  })
})
