import { describe, expect, it } from 'vitest'
import { cssVariables, live, palettes, tailwindColors, tokenNames } from '../../../shared/design/tokens.ts'
import type { TokenName } from '../../../shared/design/tokens.ts'

/** Relative luminance and contrast ratio as WCAG 2.2 defines them, https://www.w3.org/TR/WCAG22/#dfn-relative-luminance */
function luminance(hex: string): number {
  const [r, g, b] = [1, 3, 5]
    .map(at => Number.parseInt(hex.slice(at, at + 2), 16) / 255)
    .map(c => (c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4)) as [number, number, number]
  return 0.2126 * r + 0.7152 * g + 0.0722 * b
}
function contrast(a: string, b: string): number {
  const [x, y] = [luminance(a), luminance(b)]
  return (Math.max(x, y) + 0.05) / (Math.min(x, y) + 0.05)
}

/** Text wants 4.5, lines and marks that carry a meaning want 3 (success criteria 1.4.3 and 1.4.11). */
const textPairs: [TokenName, TokenName][] = [
  ...(['ink', 'soft', 'model', 'loss', 'gain', 'observed', 'residual'] as const)
    .flatMap(text => [[text, 'paper'], [text, 'wash']] as [TokenName, TokenName][]),
  ['onModel', 'model'],
]
const linePairs: [TokenName, TokenName][] = [
  ...(['caution', 'residual', 'model', 'loss', 'gain'] as const).map(line => [line, 'paper'] as [TokenName, TokenName]),
  ...(['model', 'loss', 'gain', 'ink', 'soft'] as const)
    .flatMap(line => [[line, 'sea'], [line, 'land']] as [TokenName, TokenName][]),
]

describe.each(Object.entries(palettes))('the %s palette', (_, palette) => {
  it.each(tokenNames)('writes %s as hex', (token) => {
    expect(palette[token]).toMatch(/^#[0-9a-f]{6}$/)
  })
  it.each(textPairs)('can be read: %s on %s', (text, ground) => {
    expect(contrast(palette[text], palette[ground])).toBeGreaterThanOrEqual(4.5)
  })
  it.each(linePairs)('can be seen: %s on %s', (line, ground) => {
    expect(contrast(palette[line], palette[ground])).toBeGreaterThanOrEqual(3)
  })
})

describe('the contrast measure', () => {
  it('gives the extremes that WCAG names', () => {
    expect(contrast('#000000', '#ffffff')).toBeCloseTo(21, 10)
    expect(contrast('#777777', '#ffffff')).toBeCloseTo(4.48, 2)
  })
})

describe('what is made of the tokens', () => {
  it('declares each variable for light, system dark, chosen dark and paper', () => {
    const css = cssVariables()
    for (const token of tokenNames) {
      const name = live[token].slice(4, -1)
      expect(css.split(`${name}: `).length - 1, name).toBe(4)
      expect(css.split(`${name}-rgb: `).length - 1, name).toBe(4)
    }
    expect(css).toContain('--on-model: #ffffff;')
    expect(css).toContain('--ink-rgb: 19 30 43;')
    expect(css.split('{').length).toBe(css.split('}').length)
  })
  it('names Tailwind colours after the variables', () => {
    expect(tailwindColors['on-model']).toBe('rgb(var(--on-model-rgb) / <alpha-value>)')
    for (const token of tokenNames) expect(tailwindColors).toHaveProperty(live[token].slice(6, -1))
  })
})
