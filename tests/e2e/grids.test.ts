import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, expect, inject, it } from 'vitest'
import { launch, open, signInByForm, visit } from '../support/browser'
import { gridCsv } from '../support/world'

const url = inject('url')
let browser: Browser
beforeAll(async () => { browser = await launch() })
afterAll(() => browser?.close())

it('a grid is sent, looked at, cut by a region, accepted, and its pattern stands beside the even spread', async () => {
  const { page, faults, close } = await visit(browser, url)
  await signInByForm(page, 'hydrologist')
  await open(page, '/grids')
  const adding = page.getByRole('button', { name: 'Add a grid' })
  if (await adding.count()) await adding.click()
  const content = gridCsv({ months: 24, height: (t, lat, lon) => Number((-0.001 * t * (90 - lat) * (1.2 + Math.sin(lon / 9))).toFixed(5)) })
  await page.getByLabel('A file').setInputFiles({ name: 'invented.csv', mimeType: 'text/csv', buffer: Buffer.from(content) })
  await page.getByRole('button', { name: 'Send and read it' }).click()
  await page.waitForURL(/\/grids\/[0-9A-Z]{26}/)
  await page.getByRole('img', { name: /Heights at/ }).waitFor()

  await page.getByRole('list', { name: 'Regions' }).getByRole('checkbox').first().check()
  const name = (await page.getByRole('list', { name: 'Regions' }).locator('label .font-semibold').first().textContent())!
  await page.getByLabel('Cells of the sea').selectOption('none')
  await page.getByRole('button', { name: 'Take the series' }).click()
  await page.getByText('are weighted with their area inside the outline').waitFor()
  await page.getByLabel('Is degree 1 put in?', { exact: true }).selectOption('yes')
  await page.getByLabel('Source', { exact: true }).fill('Invented for the test')
  await page.getByRole('button', { name: 'Store one series' }).click()
  await page.getByText('One series is stored.').waitFor()

  await page.getByRole('link', { name: 'To the regions' }).click()
  await page.getByRole('link', { name, exact: true }).first().click()
  await page.getByRole('heading', { name: 'Pattern of the grid' }).waitFor()
  await page.getByText(/Spread evenly, the effect on the length of day would/).waitFor()
  await page.getByText('Degree 1 is put in.').waitFor()
  expect(faults).toEqual([])
  await close()
})
