import type { Page } from 'playwright-core'
import { launch, signInByForm, visit } from '../support/browser'
import { demo } from '../support/client'
import { startServer } from '../support/server'
import type { Figure } from './measure'
import { quickest } from './measure'
import { wavyOutline } from './outlines'

const count = 500

/** Milliseconds until the list stands and answers, and from a key to the shorter list on screen. */
async function list(page: Page): Promise<{ parsed: number, ready: number, found: number }> {
  const started = performance.now()
  await page.goto('/regions')
  await page.locator('tbody tr').nth(count).waitFor()
  await page.getByRole('button', { name: 'Sign out' }).waitFor()
  const ready = performance.now() - started
  const parsed = await page.evaluate<number>('performance.getEntriesByType("navigation")[0].domContentLoadedEventEnd')
  await page.waitForLoadState('networkidle')
  const typed = performance.now()
  await page.getByLabel('Find').fill('Region 499')
  await page.getByText('1 of 5').waitFor()
  return { parsed, ready, found: performance.now() - typed }
}

/** A workspace with 500 regions of 200 vertices beside the demo's: the list, and the list beside the map. */
export async function run(): Promise<Figure[]> {
  const server = await startServer({ COUNTERPOISE_CHECK_ANSWERS: '' })
  const browser = await launch()
  try {
    const lead = await demo(server.url, 'lead')
    const { workspaceId, agencyId } = (await lead.get('sessionRead')).memberships[0]!
    const regions = Array.from({ length: count }, (_, k) => ({ name: `Region ${k}`, kind: 'basin' as const, note: '', geometry: wavyOutline(200, -175 + 7 * (k % 50), -70 + 7 * Math.floor(k / 50), 2.5) }))
    await lead.get('regionCreateMany', { params: { workspace: workspaceId }, body: { agencyId: agencyId!, regions } })
    const first = await quickest(1, () => lead.send('GET', '/regions'))
    const listAnswer = await quickest(3, () => lead.send('GET', '/regions'))
    const mapAnswer = await quickest(3, () => lead.send('GET', '/map'))
    const mapKb = (await lead.send('GET', '/map')).text.length / 1000
    const { page } = await visit(browser, server.url, { width: 1000, height: 600 })
    await signInByForm(page, 'lead')
    const { parsed, ready, found } = await list(page)
    await page.goto('/map')
    const mapParsed = await page.evaluate<number>('performance.getEntriesByType("navigation")[0].domContentLoadedEventEnd')
    await page.locator('button:not([disabled])', { hasText: 'Draw a region' }).waitFor()
    const row = page.getByRole('button', { name: /^Region 250 / })
    const pressed = performance.now()
    await row.click()
    await page.getByRole('heading', { name: /^Region 250/ }).waitFor()
    const chosen = performance.now() - pressed
    return [
      { name: `list of ${count} regions, server’s answer`, value: listAnswer, unit: 'ms', note: `page of the signed-in; limit 1000 ms; ${first.toFixed(0)} ms the first time, with common ground and effects` },
      { name: `list of ${count} regions, read by Chromium`, value: parsed, unit: 'ms', note: `with scripts run; ${ready.toFixed(0)} ms until it answers` },
      { name: `list of ${count} regions, from typing to the region found`, value: found, unit: 'ms', note: 'of which 250 ms wait for the next key' },
      { name: `map page of ${count} outlines, server’s answer`, value: mapAnswer, unit: 'ms', note: `${mapKb.toFixed(0)} KB of page with 200 vertices each; limit 1000 ms` },
      { name: `map page of ${count} outlines, read by Chromium`, value: mapParsed, unit: 'ms' },
      { name: `map page of ${count} outlines, from a press in the list to the region`, value: chosen, unit: 'ms' },
    ]
  }
  finally {
    await browser.close()
    await server.stop()
  }
}
