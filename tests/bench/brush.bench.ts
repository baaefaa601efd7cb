import { readFileSync } from 'node:fs'
import { gunzipSync } from 'node:zlib'
import type { Page } from 'playwright-core'
import { launch, open, signInByForm, visit } from '../support/browser'
import { demo } from '../support/client'
import { startServer } from '../support/server'
import type { Figure } from './measure'

/** From a press on the chart's button that narrows it to the new drawing laid out, ms; the fastest of several. */
const redrawn = `new Promise(async (done) => {
  const times = []
  for (let i = 0; i < 6; i++) {
    const wanted = i % 2 ? 'Whole span' : 'Closer'
    const button = [...document.querySelectorAll('button')].find(b => b.textContent.trim() === wanted)
    const drawing = button.parentElement.parentElement.parentElement.querySelector('svg').parentElement
    await new Promise((drawn) => {
      const started = performance.now()
      const observer = new MutationObserver(() => {
        observer.disconnect()
        void document.body.offsetHeight
        times.push(performance.now() - started)
        setTimeout(drawn, 300)
      })
      observer.observe(drawing, { childList: true, subtree: true })
      button.click()
    })
  }
  done(Math.min(...times))
})`

async function brushed(page: Page, path: string): Promise<number> {
  await open(page, path)
  await page.getByRole('button', { name: 'Closer' }).first().waitFor()
  return await page.evaluate<number>(redrawn)
}

/** Charts redrawn in Chromium when their span is narrowed: sixty years of days, and a comparison whose statistics follow the span. */
export async function run(): Promise<Figure[]> {
  const server = await startServer()
  const browser = await launch()
  try {
    const lead = await demo(server.url, 'lead')
    const { workspaceId: workspace } = (await lead.get('sessionRead')).memberships[0]!
    const run = (await lead.get('scenarioList', { params: { workspace } })).items.find(item => item.latestRun)!.latestRun!.id
    const { id } = await lead.get('observedCreate', {
      params: { workspace }, body: { name: 'Sixty years', source: 'bench', reason: '' }, file: { name: 'c04.txt', content: gunzipSync(readFileSync('tests/fixtures/eop14c04_1962_2022.txt.gz')).toString('latin1') },
    })
    const { page } = await visit(browser, server.url)
    await signInByForm(page, 'lead')
    return [
      { name: 'sixty years of days, three panels, redrawn on a new span', value: await brushed(page, `/observations/${id}`), unit: 'ms', note: 'laid out, not painted; limit 50 ms' },
      { name: 'comparison with its bands redrawn on a new span', value: await brushed(page, `/runs/${run}/attribution`), unit: 'ms', note: 'laid out, not painted; limit 50 ms' },
    ]
  }
  finally {
    await browser.close()
    await server.stop()
  }
}
