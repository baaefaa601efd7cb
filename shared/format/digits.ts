/** U+2212, as wide as a plus sign. */
export const minus = '\u2212'
/** Narrow space between groups of three digits; never broken across lines. */
export const thinSpace = '\u202f'
/** Before a unit; never broken across lines. */
export const hardSpace = '\u00a0'
/** Stands where there is no figure. */
export const noFigure = '\u2013'

/** Digits in groups of three from five digits on: 1500, 12 400, 1 712 400. */
function grouped(integer: string): string {
  return integer.length < 5 ? integer : integer.replace(/\B(?=(\d{3})+$)/g, thinSpace)
}

/** |value| with `digits` decimals, grouped; beyond 1e21, where plain notation ends, as 1.2 × 10^n. */
function magnitude(value: number, digits: number): string {
  const size = Math.abs(value)
  if (size >= 1e21) {
    const [mantissa, exponent] = size.toExponential(2).split('e+') as [string, string]
    return `${mantissa}${thinSpace}×${thinSpace}10${superscript(exponent)}`
  }
  const [integer, decimals] = size.toFixed(digits).split('.') as [string, string?]
  return decimals === undefined ? grouped(integer) : `${grouped(integer)}.${decimals}`
}

const raised = '⁰¹²³⁴⁵⁶⁷⁸⁹'

/** An integer as superscript, `-11` as ⁻¹¹. */
export function superscript(integer: string | number): string {
  return String(integer).replace(/[-\u2212]/g, '⁻').replace(/\d/g, digit => raised[Number(digit)]!)
}

/** True where the digits that are shown are all zero: no sign goes before them. */
function isShownAsZero(text: string): boolean {
  return !/[1-9]/.test(text)
}

/** Decimals that toFixed takes. */
function decimals(digits: number): number {
  return Math.min(20, Math.max(0, Math.round(digits)))
}

/** A number with a fixed count of decimals, true minus sign, thin spaces; an en dash for null, NaN and infinity. */
export function formatNumber(value: number | null | undefined, digits = 0): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return noFigure
  const text = magnitude(value, decimals(digits))
  return value < 0 && !isShownAsZero(text) ? minus + text : text
}

/** As formatNumber, with a plus sign before positive numbers. What is shown as zero has no sign. */
export function formatSigned(value: number | null | undefined, digits = 0): string {
  const text = formatNumber(value, digits)
  return value !== null && value !== undefined && value > 0 && !isShownAsZero(text) ? `+${text}` : text
}

/** Decimals that show `significant` digits of a number: 2 for 0.0364 gives 3. Never below 0. */
export function decimalsFor(value: number, significant: number): number {
  const size = Math.abs(value)
  if (!(size > 0) || !Number.isFinite(size)) return 0
  // Rounding first: two digits of 0.0996 are 0.10, which needs two decimals and not three.
  const exponent = Number(size.toExponential(significant - 1).split('e')[1])
  return Math.max(0, significant - 1 - exponent)
}

/** A number with a fixed count of significant digits. */
export function formatSignificant(value: number | null | undefined, significant = 3): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return noFigure
  return formatNumber(value, decimalsFor(value, significant))
}

/** Mantissa and power of ten: 3.7 × 10⁻¹¹. */
export function formatScientific(value: number | null | undefined, digits = 1): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return noFigure
  if (value === 0) return '0'
  const [mantissa, exponent] = Math.abs(value).toExponential(digits).split('e') as [string, string]
  return `${value < 0 ? minus : ''}${mantissa}${thinSpace}×${thinSpace}10${superscript(Number(exponent))}`
}

/** A ratio in per cent, signed: +53 %. */
export function formatShare(ratio: number | null | undefined, digits = 0): string {
  const text = formatSigned(ratio === null || ratio === undefined ? null : ratio * 100, digits)
  return text === noFigure ? text : `${text}${hardSpace}%`
}

/** A size in bytes for people: 12 kB, 3.4 MB (powers of ten). */
export function formatBytes(bytes: number): string {
  if (bytes < 1000) return `${bytes}${hardSpace}B`
  const step = bytes < 999_500 ? { size: 1e3, unit: 'kB' } : { size: 1e6, unit: 'MB' }
  return `${formatNumber(bytes / step.size, bytes / step.size < 10 ? 1 : 0)}${hardSpace}${step.unit}`
}
