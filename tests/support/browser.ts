import { existsSync } from 'node:fs'
import { AxeBuilder } from '@axe-core/playwright'
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core'
import { demoPassword } from './client'

/** Chromium from CHROMIUM_PATH or its usual place; a missing one is a failure that says so. */
export async function launch(): Promise<Browser> {
  const executablePath = process.env.CHROMIUM_PATH ?? '/usr/bin/chromium'
  if (!existsSync(executablePath)) throw new Error(`There is no Chromium at ${executablePath}: install it, or set CHROMIUM_PATH.`)
  return chromium.launch({
    executablePath,
    // WebGL by the processor; with --disable-gpu instead each click on the map takes forty times as long.
    args: ['--no-sandbox', '--use-angle=swiftshader', '--enable-unsafe-swiftshader', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync'],
  })
}

export type Look = 'light' | 'dark'
export interface Visit { page: Page, context: BrowserContext, faults: string[], close: () => Promise<void> }

/**
 * A fresh visitor whose every misstep is written down: errors on the console (hydration mismatches among them) and in scripts,
 * requests to other hosts, refusals by the Content-Security-Policy, answers of 500 and files that are missing.
 */
export async function visit(browser: Browser, url: string, { look = 'light', width = 1280, height = 900, touch = false }: { look?: Look, width?: number, height?: number, touch?: boolean } = {}): Promise<Visit> {
  const context = await browser.newContext({ baseURL: url, colorScheme: look, viewport: { width, height }, reducedMotion: 'reduce', acceptDownloads: true, hasTouch: touch })
  const faults: string[] = []
  await context.addInitScript('document.addEventListener("securitypolicyviolation", e => console.error(`policy violation: ${e.violatedDirective} ${e.blockedURI} ${e.sample}`))')
  context.on('request', (request) => {
    const { protocol, origin } = new URL(request.url())
    if (protocol !== 'data:' && protocol !== 'blob:' && origin !== url) faults.push(`request to another host: ${request.url()}`)
  })
  context.on('response', (response) => {
    const own = new URL(response.url()).pathname
    if (response.status() >= 500 || (response.status() === 404 && /^\/(_nuxt|tiles|earth|fonts)\//.test(own))) faults.push(`answer ${response.status()}: ${own}`)
  })
  const page = await context.newPage()
  // Well under a test's own limit, so that the step that hangs is the one that is named.
  page.setDefaultTimeout(45_000)
  page.on('pageerror', error => faults.push(`script error: ${error.message}`))
  page.on('console', (message) => {
    if (message.type() === 'error' || /hydration/i.test(message.text())) faults.push(`console: ${message.text()} (${message.location().url})`)
  })
  return { page, context, faults, close: () => context.close() }
}

/** Opens a page and waits until its scripts have taken over. */
export async function open(page: Page, path: string) {
  await page.goto(path, { waitUntil: 'load' })
  const taken = () => page.locator('#__nuxt').evaluate(root => '__vue_app__' in (root as object))
  // Not waitForFunction: its polling evaluates text inside the page, which the page's policy refuses.
  for (let i = 0; i < 300 && !await taken(); i++) await page.waitForTimeout(100)
  if (!await taken()) throw new Error(`the scripts of ${path} did not take over within 30 s`)
  await page.waitForLoadState('networkidle')
}

export async function signInByForm(page: Page, mailbox: string) {
  await open(page, '/sign-in')
  await page.getByLabel('E-mail').fill(`${mailbox}@demo.example`)
  await page.getByLabel('Password').fill(demoPassword)
  await page.getByRole('button', { name: 'Sign in' }).click()
  await page.getByRole('button', { name: 'Sign out' }).waitFor()
  await page.waitForURL(address => !address.pathname.startsWith('/sign-in'))
  await page.waitForLoadState('networkidle')
}

/** What axe finds against WCAG 2.2 A and AA, each with where it is. */
export async function accessibilityFaults(page: Page): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice']).analyze()
  return violations.flatMap(v => v.nodes.map(node => `${v.id}: ${v.help}: ${node.target.join(' ')}: ${node.any[0]?.message ?? node.failureSummary ?? ''}`))
}

/** How far the page can be scrolled sideways, in CSS pixels; 0 where it fits. */
export async function sidewaysScroll(page: Page): Promise<number> {
  return page.evaluate<number>('document.documentElement.scrollWidth - document.documentElement.clientWidth')
}
