import type { Browser } from 'playwright-core'
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest'
import { launch, open, signInByForm, visit, type Visit } from '../support/browser'
import { demo } from '../support/client'

// What the map tells of the regions: colours in words, selection and month in the address, common ground.

const url = inject('url')
let browser: Browser
let lead: Visit
const shared = { id: '', neighbour: '' }

beforeAll(async () => {
  const client = await demo(url, 'lead')
  const { workspaceId, agencyId } = (await client.get('sessionRead')).memberships[0]!
  const params = { workspace: workspaceId }
  const neighbour = (await client.get('regionList', { params })).items.find(region => region.kind === 'aquifer' && region.trend)!
  const [lon, lat] = neighbour.outline.centroid
  // The aquifer's middle lies inside, so the two share ground.
  const ring = [[lon - 1, lat - 1], [lon + 1, lat - 1], [lon + 1, lat + 1], [lon - 1, lat + 1], [lon - 1, lat - 1]]
  const made = await client.get('regionCreate', { params, body: { name: 'Lake of the test', kind: 'lake', agencyId: agencyId!, geometry: { type: 'Polygon', coordinates: [ring] } } })
  Object.assign(shared, { id: made.id, neighbour: neighbour.name })
  browser = await launch()
  lead = await visit(browser, url, { width: 1000, height: 600 })
  await signInByForm(lead.page, 'lead')
})
afterAll(async () => {
  await browser?.close()
  if (shared.id) await (await demo(url, 'lead')).get('regionRemove', { params: { id: shared.id }, query: { revision: 1 } })
})
afterEach(() => expect(lead.faults.splice(0)).toEqual([]))

describe('the regions on the map', () => {
  it('are coloured by what one chooses, told by words and units, and the address keeps it', async () => {
    const { page } = lead
    await open(page, '/map')
    const colours = page.getByRole('group', { name: 'Regions coloured by' })
    const legend = page.getByRole('list', { name: 'What the colours mean' })
    await expect.poll(() => legend.innerText()).toMatch(/mass lost[\s\S]*no series/)
    await colours.getByRole('button', { name: 'Effect on the day' }).click()
    await expect.poll(() => page.url()).toContain('colour=day')
    expect(await legend.innerText()).toMatch(/a longer day[\s\S]*a shorter day[\s\S]*darker is more, up to .*µs\/yr/)
    await page.getByText('µs/yr ± 1σ').waitFor()
    await colours.getByRole('button', { name: 'Kind' }).click()
    await expect.poll(() => legend.innerText()).toMatch(/aquifer[\s\S]*lake[\s\S]*ice sector/)
    expect(await colours.getByRole('button', { name: 'Kind' }).getAttribute('aria-pressed')).toBe('true')
  })

  it('are chosen in the list, keep their place in the address, and say whose ground they share', async () => {
    const { page } = lead
    const row = page.getByRole('button', { name: /^Lake of the test/ })
    expect(await row.innerText()).toContain('no series')
    await row.focus()
    await expect.poll(() => page.getByText('lake, no series').count()).toBe(1)
    await row.click()
    await expect.poll(() => page.url()).toContain(`region=${shared.id}`)
    await page.getByRole('heading', { name: /^Lake of the test/ }).waitFor()
    await expect.poll(() => page.getByText('Lake of the test', { exact: false }).filter({ hasText: /share .*km²/ }).count(), { timeout: 30_000 }).toBeGreaterThan(0)
    expect(await page.getByRole('listitem').filter({ hasText: /share .*km²/ }).first().innerText()).toContain(shared.neighbour)
    await page.getByRole('button', { name: 'All regions' }).click()
    await expect.poll(() => page.url()).not.toContain('region=')
    expect(page.url()).toContain('colour=kind')
  })

  it('play through the months by keys, and the address keeps the month', async () => {
    const { page } = lead
    await page.getByRole('button', { name: 'Month by month' }).click()
    const slider = page.getByRole('slider', { name: 'Month' })
    await slider.waitFor()
    const month = () => slider.getAttribute('aria-valuetext')
    const last = await month()
    expect(last).toMatch(/^[A-Z][a-z]+ \d{4}$/)
    await slider.press('ArrowLeft')
    await expect.poll(month).not.toBe(last)
    await expect.poll(() => page.url()).toMatch(/month=\d{4}-\d{2}/)
    const before = await month()
    await page.getByRole('button', { name: 'Later month' }).click()
    await expect.poll(month).toBe(last)
    await slider.press('Home')
    await expect.poll(month).not.toBe(before)
    expect(await page.getByRole('button', { name: 'Earlier month' }).isDisabled()).toBe(true)
    // This visitor wants less motion: the months go by step alone.
    expect(await page.getByRole('button', { name: 'Play' }).count()).toBe(0)
  })
})
