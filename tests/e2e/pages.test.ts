import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import { accessibilityFaults, launch, open, sidewaysScroll, signInByForm, visit, type Look, type Visit } from '../support/browser'
import { demo } from '../support/client'
import { pageRoutes, pageVisits, type PageVisit } from '../support/pages'

// Every page of the product, light and dark, wide and as narrow as a phone.

const url = inject('url')
const routes = pageRoutes()
let browser: Browser
let visits: Record<string, PageVisit>
const visitors = new Map<string, Visit>()

beforeAll(async () => {
  browser = await launch()
  visits = await pageVisits(await demo(url, 'lead'), await demo(url, 'admin'))
})
afterAll(() => browser?.close())

/** The same visitor for all pages of one look and width: signing in once is enough. */
async function visitor(as: PageVisit['as'], look: Look, width: number): Promise<Visit> {
  const key = `${as} ${look} ${width}`
  const known = visitors.get(key)
  if (known) return known
  const fresh = await visit(browser, url, { look, width })
  visitors.set(key, fresh)
  if (as !== 'nobody') await signInByForm(fresh.page, as)
  return fresh
}

it('each page has an address to be opened at', () => {
  expect(Object.keys(visits).sort()).toEqual(routes)
})

describe.each(routes)('%s', (route) => {
  it.each(['light', 'dark'] as const)('opens without a fault and can be read by everybody, %s', async (look) => {
    const { as, path } = visits[route]!
    const { page, faults } = await visitor(as, look, 1280)
    faults.length = 0
    await open(page, path)
    expect(new URL(page.url()).pathname).toBe(path.split('?')[0])
    expect(await page.locator('h1').count()).toBe(1)
    expect(await page.title()).toMatch(/Counterpoise/)
    expect(await accessibilityFaults(page)).toEqual([])
    expect(faults).toEqual([])
  })

  it('fits a phone', async () => {
    const { as, path } = visits[route]!
    const { page, faults } = await visitor(as, 'light', 390)
    faults.length = 0
    await open(page, path)
    expect(await sidewaysScroll(page)).toBe(0)
    expect(faults).toEqual([])
  })
})

describe('what cannot be opened', () => {
  it('a page that needs an account asks nobody to sign in, and leads on from there', async () => {
    const { page, faults, close } = await visit(browser, url)
    for (const [route, { as, path }] of Object.entries(visits)) {
      if (as === 'nobody' || route === '/signed-in') continue
      await open(page, path)
      expect(new URL(page.url()).pathname, route).toBe('/sign-in')
      expect(new URL(page.url()).searchParams.get('to'), route).toBe(path)
    }
    await page.getByLabel('E-mail').fill('lead@demo.example')
    await page.getByLabel('Password').fill('counterpoise-demo')
    const last = new URL(page.url()).searchParams.get('to')!
    await page.getByRole('button', { name: 'Sign in' }).click()
    await page.waitForURL(address => address.pathname === last)
    expect(faults).toEqual([])
    await close()
  })

  it('a page, a region and an edition that do not exist say so', async () => {
    const { page, close } = await visit(browser, url)
    await signInByForm(page, 'lead')
    for (const path of ['/no-such-page', '/p/never-published', '/regions/01ARZ3NDEKTSV4RRFFQ69G5FAV']) {
      await page.goto(path)
      await page.waitForLoadState('networkidle')
      expect(await page.locator('h1').innerText(), path).toMatch(/not|no /i)
      expect(await accessibilityFaults(page), path).toEqual([])
    }
    await close()
  })
})
