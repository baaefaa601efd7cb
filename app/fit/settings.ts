import type { FitAnswer } from '#shared/api/fitSchemas'
import type { SeriesData } from '#shared/figures/series/data'

/** What the address of a fit says; the interface takes the same words. */
export interface FitChoice {
  acceleration: boolean
  annual: boolean
  semiannual: boolean
  alias: boolean
  /** Dates with commas between, as they stand in the address. */
  step: string
  from: string
  to: string
  maxGap: number
  version: string | undefined
}

const DEFAULT_GAP = 62
type Query = Record<string, unknown>
const text = (value: unknown) => typeof value === 'string' ? value : ''
const flag = (value: unknown, byDefault: boolean) => value === 'true' ? true : value === 'false' ? false : byDefault

export function choiceOfQuery(query: Query): FitChoice {
  const gap = Number(text(query.maxGap) || DEFAULT_GAP)
  return {
    acceleration: flag(query.acceleration, false), annual: flag(query.annual, true), semiannual: flag(query.semiannual, true), alias: flag(query.alias, false),
    step: text(query.step), from: text(query.from), to: text(query.to),
    maxGap: Number.isInteger(gap) && gap >= 1 && gap <= 2000 ? gap : DEFAULT_GAP,
    version: text(query.version) || undefined,
  }
}

/** The choice as an address or a question; what is the default is left out. */
export function queryOfChoice({ acceleration, annual, semiannual, alias, step, from, to, maxGap, version }: FitChoice): Record<string, string | undefined> {
  return {
    version, acceleration: acceleration ? 'true' : undefined, annual: annual ? undefined : 'false', semiannual: semiannual ? undefined : 'false',
    alias: alias ? 'true' : undefined, step: step || undefined, from: from || undefined, to: to || undefined, maxGap: maxGap === DEFAULT_GAP ? undefined : String(maxGap),
  }
}

/** Values with the fit above, residuals below; lines end at gaps. */
export function fitPanels(fit: FitAnswer): SeriesData[] {
  const maxGapDays = fit.settings.maxGapDays
  return [
    { title: 'Mass and fit', unit: 'Gt', series: [
      { label: 'mass', role: 'observed', mjd: fit.mjd, value: fit.massGt, sigma: fit.sigmaGt, maxGapDays },
      { label: 'fit', role: 'model', mjd: fit.mjd, value: fit.modelGt, maxGapDays },
    ] },
    { title: 'Residuals', unit: 'Gt', series: [{ label: 'residual', role: 'residual', mjd: fit.mjd, value: fit.residualGt, maxGapDays }] },
  ]
}
