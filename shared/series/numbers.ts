const plain = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eEdD][+-]?\d+)?$/

/** Cells that stand for "no value". −999 is not among them: it may be a mass. */
const missingMarks = new Set(['', 'nan', 'na', 'n/a', 'null', 'none', '-', '--', '\u2013', '\u2014', '*', '-9999', '-9999.0', '-9999.00', '-99999'])

/** Whether a cell stands for a missing value, by the usual marks or by those that the user names. */
export function isMissing(cell: string, own: readonly string[] = []): boolean {
  const text = cell.trim().replace('\u2212', '-').toLowerCase()
  return missingMarks.has(text) || own.some(mark => mark.trim().toLowerCase() === text)
}

/**
 * A number as files write it: plain decimal, with exponent (Fortran's D too), true minus sign accepted. NaN for anything
 * else, thousands separators included, since one cannot tell 1,234 from 1.234. `exponent` moves the decimal point by so many
 * places without a rounding of its own: 0.00081 s become 0.81 ms exactly.
 */
export function parseNumber(cell: string, decimalComma = false, exponent = 0): number {
  let text = cell.trim().replace('\u2212', '-')
  if (decimalComma) {
    if (text.includes('.')) return Number.NaN
    text = text.replace(',', '.')
  }
  if (!plain.test(text)) return Number.NaN
  const [digits, power] = text.split(/[eEdD]/) as [string, string?]
  return Number(`${digits}e${Number(power ?? 0) + exponent}`)
}
