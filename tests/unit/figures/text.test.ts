import { createRequire } from 'node:module'
import { describe, expect, it } from 'vitest'
import { boxesMeet, segmentMeets, spread, wrapped } from '../../../shared/figures/layout.ts'
import { coordinate, element, escapeXml, textBox } from '../../../shared/figures/svg.ts'
import { shortened, textWidth } from '../../../shared/figures/textWidth.ts'
import { expectWellFormed } from './expectSound.ts'

const require = createRequire(import.meta.url)
/** Reads the font files themselves, so that the table of widths has its truth outside. */
const { openSync } = createRequire(require.resolve('pdfmake'))('fontkit') as { openSync: (path: string) => { unitsPerEm: number, layout: (text: string, features: string[]) => { glyphs: { advanceWidth: number }[] } } }
const folder = 'node_modules/@expo-google-fonts/noto-sans'

describe('textWidth', () => {
  it.each([
    [400, `${folder}/400Regular/NotoSans_400Regular.ttf`],
    [600, `${folder}/600SemiBold/NotoSans_600SemiBold.ttf`],
  ] as const)('is that of the font file at weight %i', (weight, path) => {
    const font = openSync(path)
    for (const text of ['Northern ice dome', '+5.15 ± 0.36', '−1\u202f712\u202f400 km²', 'χ₁ 90°\u00a0E', 'ΔLOD µs', 'Größe “Åre”, Çöl–Ñu', '!#$%&()*+/:;<=>?@[]^_`{|}~']) {
      const glyphs = [...text].reduce((sum, character) => sum + font.layout(character, []).glyphs.reduce((part, glyph) => part + glyph.advanceWidth, 0), 0)
      expect(textWidth(text, 1000, weight), text).toBeCloseTo(glyphs * 1000 / font.unitsPerEm, -0.5)
    }
  })
  it('does not underestimate other alphabets', () => {
    const font = openSync(`${folder}/400Regular/NotoSans_400Regular.ttf`)
    for (const text of ['Ледник Северный', 'Πάγος', 'Łódź Žďár']) {
      const glyphs = [...text].reduce((sum, character) => sum + font.layout(character, []).glyphs[0]!.advanceWidth, 0)
      expect(textWidth(text, 1000)).toBeGreaterThan(glyphs * 0.97)
    }
  })
  it('shortens with an ellipsis', () => {
    const cut = shortened('Northern ice dome', 60, 12)
    expect(cut).toMatch(/^North.*…$/)
    expect(textWidth(cut, 12)).toBeLessThanOrEqual(60)
    expect(shortened('ab', 60, 12)).toBe('ab')
  })
})

describe('XML', () => {
  it('is escaped, control characters and half surrogates dropped', () => {
    expect(escapeXml('a<b>&"c"\'\u0000\uD800x')).toBe('a&lt;b&gt;&amp;&quot;c&quot;&#39;x')
    expect(escapeXml('🌍')).toBe('🌍')
    expectWellFormed(element('text', { 'data-x': '<&">' }, escapeXml('<&">')))
  })
  it('refuses what is not a number', () => {
    expect(() => coordinate(Number.NaN)).toThrow('a coordinate must be finite, got NaN')
    expect(element('g', { a: undefined, b: null, c: -0.001 })).toBe('<g c="0"/>')
  })
})

describe('layout', () => {
  it('knows when boxes and lines meet', () => {
    const box = { x: 0, y: 0, width: 10, height: 10 }
    expect(boxesMeet(box, { ...box, x: 9 })).toBe(true)
    expect(boxesMeet(box, { ...box, x: 10 })).toBe(false)
    expect(boxesMeet(box, { ...box, x: 11 }, 2)).toBe(true)
    expect(segmentMeets([-5, 5], [15, 6], box)).toBe(true)
    expect(segmentMeets([-5, 5], [-1, 6], box)).toBe(false)
    expect(segmentMeets([-5, 12], [12, 20], box)).toBe(false)
    expect(segmentMeets([5, 5], [5, 5], box)).toBe(true)
  })
  it('spreads rows apart in order and in bounds', () => {
    expect(spread([50, 51, 10], 10, 0, 100)).toEqual([50, 60, 10])
    expect(spread([99, 100, 100], 10, 0, 100)).toEqual([80, 90, 100])
    expect(spread([5, 5, 5], 80, 0, 100)).toEqual([5, 50, 100].map((_, i) => [0, 50, 100][i]!))
    expect(spread([], 10, 0, 100)).toEqual([])
  })
  it('wraps by words', () => {
    expect(wrapped('one two three', 7, line => line.length)).toEqual(['one two', 'three'])
  })
  it('anchors text', () => {
    const width = textWidth('abc', 12)
    expect(textBox('abc', 100, 50, { anchor: 'end' }).x).toBeCloseTo(100 - width, 10)
    expect(textBox('abc', 100, 50, { anchor: 'middle' }).x).toBeCloseTo(100 - width / 2, 10)
  })
})
