/** A figure as people type it: `−0,8`, `+2.3`, `1 200`. Null where the field is empty, NaN where it is not a number. */
export function readFigure(text: string): number | null {
  const plain = text.trim().replace(/[\u2212\u2013]/g, '-').replace(/[\s\u00A0\u202F]/g, '').replace(',', '.')
  if (plain === '') return null
  return /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/.test(plain) ? Number(plain) : Number.NaN
}

/** A figure as it stands in a field, every digit kept, with a true minus sign. */
export function writeFigure(value: number | null | undefined): string {
  return value === null || value === undefined || !Number.isFinite(value) ? '' : String(value).replace('-', '\u2212')
}

export interface PairReading { pair: { value: number, sigma: number } | null, fault: string | null }

/** A value with its one-sigma from two fields. Both empty: none. */
export function readPair(valueText: string, sigmaText: string): PairReading {
  const [value, sigma] = [readFigure(valueText), readFigure(sigmaText)]
  if (value === null && sigma === null) return { pair: null, fault: null }
  if (value === null) return { pair: null, fault: 'The value is missing.' }
  if (Number.isNaN(value)) return { pair: null, fault: `“${valueText.trim()}” is not a number.` }
  if (sigma === null) return { pair: null, fault: 'The one-sigma is missing; enter 0 where none is known.' }
  if (Number.isNaN(sigma)) return { pair: null, fault: `“${sigmaText.trim()}” is not a number.` }
  if (sigma < 0) return { pair: null, fault: 'The one-sigma must not be negative.' }
  return { pair: { value, sigma }, fault: null }
}
