import { execFileSync } from 'node:child_process'
import { mkdtempSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { reportPdf } from '../../../server/services/report/reportPdf'
import { defaultChain, readChain } from '../../../shared/observed/readChain'
import { cautions } from '../../../shared/text/cautions'
import { findingSentence } from '../../../shared/text/finding'
import { hostileRegions } from '../figures/hostile'
import { withPhysics } from '../figures/sampleRun'
import { sampleReport } from './sampleReport'
import type { ReportData } from '../../../server/services/report/types'

const folder = resolve('node_modules/@expo-google-fonts/noto-sans')
const fonts = {
  normal: join(folder, '400Regular/NotoSans_400Regular.ttf'),
  bold: join(folder, '600SemiBold/NotoSans_600SemiBold.ttf'),
  italics: join(folder, '400Regular_Italic/NotoSans_400Regular_Italic.ttf'),
}

const work = mkdtempSync(join(tmpdir(), 'report-'))
afterAll(() => rmSync(work, { recursive: true }))

/** Runs one of poppler's tools; where it is missing the test fails and says so. */
function poppler(tool: string, ...args: string[]): string {
  try {
    return execFileSync(tool, args, { encoding: 'utf8', maxBuffer: 1 << 26 })
  }
  catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') throw new Error(`${tool} is missing: install poppler-utils`)
    throw error
  }
}

async function printed(data: ReportData) {
  const bytes = await reportPdf(data, fonts)
  const file = join(work, 'report.pdf')
  writeFileSync(file, bytes)
  const pages = poppler('pdftotext', '-layout', file, '-').split('\f').slice(0, -1)
  // Spaces of every width and line breaks are one space.
  const text = poppler('pdftotext', '-raw', file, '-').replace(/\s+/gu, ' ')
  return { bytes, file, pages, text }
}
const flat = (text: string) => text.replace(/\s+/gu, ' ')

describe('the report', () => {
  const data = sampleReport()
  let report: Awaited<ReturnType<typeof printed>>
  beforeAll(async () => {
    report = await printed(data)
  }, 60_000)

  it('opens with the finding', () => {
    expect(flat(report.pages[0]!)).toContain(flat(findingSentence(data.result)))
    expect(flat(report.pages[0]!)).toContain('Calculated, not observed.')
  })

  it('holds hashes, checksums, people and time', () => {
    for (const text of [data.runHash, data.inputSha256, data.result.earthModelChecksum, 'M. Arden', '16 March 2026, 14:05 UTC', 'run 14', 'Halcyon Compact']) {
      expect(report.text).toContain(text)
    }
    for (const { name, agency, seriesSha256, outlineSha256 } of data.sources) {
      for (const text of [name, agency, ...[0, 16, 32, 48].flatMap(at => [seriesSha256.slice(at, at + 16), outlineSha256.slice(at, at + 16)])]) expect(report.text).toContain(text)
    }
    expect(report.text).toContain('Synthetic, made from seed 7')
  })

  it('of a withdrawn edition says so first, with the reason, and on every page', async () => {
    const edition = { title: 'Six regions', slug: 'six-regions', n: 2, licence: 'CC BY 4.0', createdAt: '2026-03-17T09:00:00.000Z', withdrawn: { at: '2026-04-02T08:30:00.000Z', reason: 'One series was in the wrong unit.' } }
    const { pages, text } = await printed({ ...data, edition })
    expect(flat(pages[0]!)).toMatch(/This edition was withdrawn on 2 April 2026, 08:30 UTC\. *One series was in the wrong unit\./)
    expect(flat(pages[0]!).indexOf('withdrawn')).toBeLessThan(flat(pages[0]!).indexOf('calculated to'))
    for (const page of pages) expect(page).toContain('Withdrawn')
    for (const told of ['Six regions, edition 2, read at /p/six-regions/2', '17 March 2026, 09:00 UTC', 'CC BY 4.0']) expect(text).toContain(told)
    expect(report.text).not.toMatch(/withdrawn/i)
  }, 60_000)

  it('holds the budget with its uncertainties', () => {
    for (const figures of ['+5.15 ± 0.36', '+3.47 ± 0.45', '+0.515 ± 0.036', '−214 ± 15', '+9.63 ± 0.60', '6.17 ± 0.40', '30° ± 7° W', '−31 ± 12']) {
      expect(report.text.replace(/ +/g, ' ')).toContain(figures)
    }
    for (const row of ['Tidal braking', 'Rest of the world, not in this account', 'not entered', 'Observed', 'Residual']) expect(report.text).toContain(row)
  })

  it('holds method, constants with sources and every caution that applies', () => {
    for (const text of ['Gross (2007), Treatise on Geophysics 3', '1.099872', 'Natural Earth 1:50m', 'uniform ocean response', 'zonal tides']) expect(report.text).toContain(text)
    for (const key of ['core', 'legal', 'operational', 'restOfWorld', 'noise', 'invented', 'notRemoved'] as const) expect(report.text).toContain(cautions[key])
  })

  it('is numbered and marks invented data on every page', () => {
    report.pages.forEach((text, i) => {
      expect(text).toContain(`${i + 1} of ${report.pages.length}`)
      expect(text).toContain('Invented data')
    })
  })

  it('embeds its fonts and knows every sign', () => {
    const embedded = poppler('pdffonts', report.file).trim().split('\n').slice(2)
    expect(embedded.length).toBeGreaterThanOrEqual(2)
    for (const line of embedded) {
      expect(line).toContain('NotoSans')
      expect(line).toMatch(/TrueType\s.*\byes yes yes\b/)
    }
    expect(report.text).not.toContain('\uFFFD')
    expect(report.text).not.toMatch(/NaN|undefined|null|Infinity|\[object/)
  })

  it('has vector figures and no picture', () => {
    expect(poppler('pdfimages', '-list', report.file).trim().split('\n').slice(2)).toEqual([])
  })

  it('renders every page with ink on it', () => {
    const base = join(work, 'page')
    poppler('pdftoppm', '-r', '40', '-gray', report.file, base)
    const files = readdirSync(work).filter(name => name.startsWith('page-'))
    expect(files).toHaveLength(report.pages.length)
    for (const name of files) {
      // The pixels of a PGM stand at its end; its head is shorter than this.
      const pixels = readFileSync(join(work, name)).subarray(32)
      const inked = pixels.filter(value => value < 128).length / pixels.length
      expect(inked, name).toBeGreaterThan(0.0015)
      expect(inked, name).toBeLessThan(0.3)
    }
    for (const text of report.pages) expect(flat(text).length).toBeGreaterThan(300)
  })

  it('is the same to the byte when printed again', async () => {
    expect(Buffer.from(await reportPdf(sampleReport(), fonts)).equals(Buffer.from(report.bytes))).toBe(true)
  }, 60_000)
})

describe('a report of other accounts', () => {
  it('without comparison and invented data says neither', async () => {
    const { text, pages } = await printed({ ...sampleReport(hostileRegions['one region'], false), invented: false })
    expect(text).not.toMatch(/Invented data|Comparison with observation|Residual/)
    expect(text).toContain('one region (Northern ice dome)')
    expect(pages.length).toBeGreaterThanOrEqual(4)
  }, 60_000)

  it('states how the observed series was reduced: the chain by name, its steps, and its JSON whole', async () => {
    const data = sampleReport()
    const chain = { ...defaultChain(), steps: [...defaultChain().steps, { kind: 'background' as const, on: true, rows: [{ key: 'b', name: 'Tidal braking', source: 'a source, with “signs” and a long name', core: null, lodMsPerCentury: { value: 2.3, sigma: 0.1 }, chi1MasPerYear: null, chi2MasPerYear: null }] }] }
    data.comparison = { ...data.comparison!, reduction: { name: 'Tides out', chain, chartNote: 'trend left in, seasons left in', steps: [{ title: 'Zonal tides', sentence: 'All 62 zonal tides of Table 8.1 are taken off.', source: 'IERS Conventions (2010)' }] } }
    const { text } = await printed(data)
    expect(text).toContain('Reduction of the observed series the chain “Tides out”; trend left in, seasons left in')
    expect(text).toContain('1. All 62 zonal tides of Table 8.1 are taken off. IERS Conventions (2010)')
    // Copied out of the PDF it is still the chain.
    const from = text.indexOf('{ "schemaVersion"')
    const json = text.slice(from, text.indexOf('} ] } ] }', from) + 9)
    expect(readChain(JSON.parse(json))).toEqual(chain)
  }, 60_000)

  it('holds derived quantities, the model’s own lines beside the data, and where water goes', async () => {
    const data = sampleReport()
    data.result = withPhysics(data.result)
    data.sources[0] = { ...data.sources[0]!, fractionToOcean: 0.5, restTo: 'r2', groundedFraction: 0.9 }
    const { text } = await printed(data)
    for (const part of [
      'Derived quantities', '+1.181 ± 0.074', '−0.710 ± 0.040', 'centre of mass relative to the centre of figure (CM − CF)',
      'Model uncertainty', 'Coefficient set', 'Two per cent.', '0.051', 'Data, one sigma', 'added neither to one another nor to the ± of the data',
      'Kept on land: Northern ice dome to Southern ice margin', '50 % reaches the sea, the rest goes to Southern ice margin.', '90 % of the ice is grounded above flotation',
    ]) expect(text).toContain(part)
    expect(text).not.toMatch(/[\uFFFD√]/)
    // The budget's own errors stay what they are without the lines.
    expect(text).toContain('+9.63 ± 0.60')
  }, 60_000)

  it('lists overlaps before the sum and keeps every row of a long budget', async () => {
    const regions = Array.from({ length: 40 }, (_, i) => ({ ...hostileRegions['twelve with long names']![i % 12]!, name: `Basin & "reach" <${i}>` }))
    const data = sampleReport(regions)
    data.result.overlaps = [{ a: 'r1', b: 'r2', areaKm2: 12_300, shareOfA: 0.25, shareOfB: 0.5 }]
    const { text } = await printed(data)
    expect(text.indexOf('share 12 300 km², 25 % of the first and 50 % of the second')).toBeGreaterThan(0)
    expect(text.indexOf('Before the sum')).toBeLessThan(text.indexOf('trends per Julian year'))
    for (let i = 0; i < 40; i++) expect(text).toContain(`Basin & "reach" <${i}>`)
  }, 90_000)
})
