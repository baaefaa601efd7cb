import { decimalsFor, formatNumber, formatSigned, hardSpace, noFigure, thinSpace } from './digits.ts'

export interface MeasuredText {
  /** `+5.15` */
  value: string
  /** `± 0.36`, empty where there is no uncertainty. */
  sigma: string
  /** Both: `+5.15 ± 0.36`. */
  text: string
}

export interface MeasuredOptions {
  /** Plus sign before positive values; true unless told. */
  signed?: boolean
  /** Most significant digits of the value, whatever the uncertainty: the model is no better than a few in a thousand. */
  significant?: number
  /** Most decimals, whatever the uncertainty: a column reads better when its small rows do not run on. */
  decimals?: number
  /** Unit behind both, in `text` only. */
  unit?: string
}

/** Decimals beyond which nothing here means anything. */
const mostDecimals = 6

/**
 * Decimals that a value with this one-sigma deserves: two significant digits of sigma, but no more than `significant`
 * digits of the value. Three significant digits of the value where there is no sigma.
 */
export function measuredDecimals(value: number, sigma: number | null | undefined, significant = 5): number {
  const known = sigma !== null && sigma !== undefined && Number.isFinite(sigma) && sigma > 0
  const bySigma = known ? decimalsFor(sigma, 2) : decimalsFor(value, 3)
  const byValue = value === 0 || (known && Math.abs(value) <= sigma) ? mostDecimals : decimalsFor(value, significant)
  return Math.min(bySigma, byValue, mostDecimals)
}

/** A value with its one-sigma, digits chosen from sigma. A sigma too small for the digits shown is given as a bound. */
export function formatMeasured(
  value: number | null | undefined,
  sigma: number | null | undefined,
  options: MeasuredOptions = {},
): MeasuredText {
  if (value === null || value === undefined || !Number.isFinite(value)) return { value: noFigure, sigma: '', text: noFigure }
  const digits = Math.min(measuredDecimals(value, sigma, options.significant), options.decimals ?? mostDecimals)
  const shown = options.signed === false ? formatNumber(value, digits) : formatSigned(value, digits)
  const shownSigma = sigmaText(sigma, digits)
  const unit = options.unit ? `${hardSpace}${options.unit}` : ''
  return { value: shown, sigma: shownSigma, text: `${shown}${shownSigma ? `${hardSpace}${shownSigma}` : ''}${unit}` }
}

function sigmaText(sigma: number | null | undefined, digits: number): string {
  if (sigma === null || sigma === undefined || !Number.isFinite(sigma) || sigma <= 0) return ''
  const text = formatNumber(sigma, digits)
  return /[1-9]/.test(text) ? `±${hardSpace}${text}` : `±${hardSpace}<${thinSpace}${formatNumber(10 ** -digits, digits)}`
}
