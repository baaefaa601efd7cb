import { DEGREE } from '../earth/constants.ts'
import { formatMeasured, formatNumber, formatSigned } from '../format/numbers.ts'
import type { RunInput, RunResult } from '../types/run.ts'
import { driftOfRow, loadedBudget } from './budget.ts'
import type { LoadedBudget, LoadedRow, ObservedRates, Rate } from './budget.ts'
import { covarianceOfLoaded, sigmaOf } from './loaded.ts'
import type { Loaded } from './loaded.ts'
import { netRegions } from './netRegions.ts'

export interface ClosingMass {
  key: string
  name: string
  /** Mass rate beyond the reported one that would close what this region can close, Gt per year. */
  extraGtPerYear: Rate
  reportedGtPerYear: Rate
  /** Part of the residual drift that it closes, and what remains, mas per year: χ₁, χ₂ and length. */
  closes: { chi1: number, chi2: number, length: number }
  remains: { chi1: number, chi2: number, length: number }
  /** Angle between the residual drift and the line that this region can push the pole along, degrees, 0…90. */
  offLineDeg: number
  /** What that mass would do to the day, beside what is left there, µs per year; no share. */
  lodMicrosecondsPerYear: number
  residualLodMicrosecondsPerYear: Rate | null
  /** Extra mass in sigmas of the region's own data; null where the data have no error. */
  sigmasFromData: number | null
  /** `none`: the residual holds nothing that this region could close beyond its error. */
  verdict: 'none' | 'plausible' | 'not-plausible' | 'unknown'
  sentence: string
}

export interface ClosingResidual { regions: ClosingMass[], reason: string | null }

/** Sigmas of its data within which an extra mass counts as plausible, and of its own error below which there is none. */
const PLAUSIBLE = 2
const PRESENT = 2

/**
 * What would close the residual: for each region by itself the mass that explains the component of the residual drift that this
 * region can push the pole along, what remains then, and whether its data leave room for that mass. The estimate is
 * m = gᵀC⁻¹r/(gᵀC⁻¹g), g the response per gigatonne, C the covariance of the residual without the region's own error. The length of day
 * is not closed by any region, since the core moves it; what the mass would do to it is shown.
 */
export function closingResidual(input: RunInput, result: RunResult, observed: ObservedRates): ClosingResidual {
  const budget = loadedBudget(input, result, observed)
  const residual = driftOfRow(budget.residual)
  if (!residual) {
    return {
      regions: [],
      reason: budget.residual.figures.lod
        ? 'The pole is not observed. The length of day alone is not closed by a region: the Earth’s core moves it far more.'
        : 'Nothing is observed that a region could close.'
    }
  }
  return {
    reason: null,
    regions: netRegions(result).filter(region => region.scale !== 0).map(region => closeWith(
      budget, budget.rows.find(row => row.key === region.key)!, { chi1: region.perGt.chi1Mas, chi2: region.perGt.chi2Mas, lod: region.perGt.lodMicroseconds }
    ))
  }
}

function closeWith(budget: LoadedBudget, row: LoadedRow, perGt: { chi1: number, chi2: number, lod: number }): ClosingMass {
  const own = budget.ownCause.get(row.key)!
  const without = (figure: Loaded): Loaded => {
    const other = { value: figure.value, loadings: Float64Array.from(figure.loadings) }
    other.loadings[own] = 0
    return other
  }
  const [r1, r2] = [without(budget.residual.figures.chi1!), without(budget.residual.figures.chi2!)]
  const [c11, c12, c22] = [covarianceOfLoaded(r1, r1), covarianceOfLoaded(r1, r2), covarianceOfLoaded(r2, r2)]
  const determinant = c11 * c22 - c12 * c12
  // C⁻¹g; a residual without any error is weighed evenly.
  const sound = determinant > 1e-12 * (c11 + c22) ** 2
  const [p1, p2] = sound ? [(c22 * perGt.chi1 - c12 * perGt.chi2) / determinant, (c11 * perGt.chi2 - c12 * perGt.chi1) / determinant] : [perGt.chi1, perGt.chi2]
  const norm = p1 * perGt.chi1 + p2 * perGt.chi2
  const extra = norm > 0 ? (p1 * r1.value + p2 * r2.value) / norm : 0
  const sigma = norm > 0 && sound ? 1 / Math.sqrt(norm) : 0
  const vector = (chi1: number, chi2: number): { chi1: number, chi2: number, length: number } => ({ chi1, chi2, length: Math.hypot(chi1, chi2) })
  const closes = vector(extra * perGt.chi1, extra * perGt.chi2)
  const remains = vector(r1.value - closes.chi1, r2.value - closes.chi2)
  const reported = row.massGtPerYear ?? { value: 0, sigma: 0 }
  const sigmas = reported.sigma > 0 ? Math.abs(extra) / reported.sigma : null
  const verdict = Math.abs(extra) < PRESENT * sigma ? 'none' : sigmas === null ? 'unknown' : sigmas <= PLAUSIBLE ? 'plausible' : 'not-plausible'
  const day = budget.residual.figures.lod
  const closing = {
    key: row.key, name: row.name, extraGtPerYear: { value: extra, sigma }, reportedGtPerYear: reported, closes, remains,
    offLineDeg: offLine(r1.value, r2.value, perGt),
    lodMicrosecondsPerYear: extra * perGt.lod,
    residualLodMicrosecondsPerYear: day ? { value: day.value, sigma: sigmaOf(day) } : null,
    sigmasFromData: sigmas, verdict
  } as const
  return { ...closing, sentence: sentenceOf(closing) }
}

function offLine(r1: number, r2: number, { chi1, chi2 }: { chi1: number, chi2: number }): number {
  const angle = Math.abs(Math.atan2(r1 * chi2 - r2 * chi1, r1 * chi1 + r2 * chi2))
  return Math.min(angle, Math.PI - angle) / DEGREE
}

function sentenceOf(closing: Omit<ClosingMass, 'sentence'>): string {
  const { name, extraGtPerYear: extra, reportedGtPerYear: reported, closes, remains, verdict, sigmasFromData, lodMicrosecondsPerYear: lod } = closing
  const length = (v: number): string => formatNumber(v, v < 1 ? 2 : 1)
  if (verdict === 'none') return `${name}: the residual drift holds nothing along its line that stands out of the errors (${formatMeasured(extra.value, extra.sigma, { unit: 'Gt per year' }).text}).`
  const amount = formatMeasured(Math.abs(extra.value), extra.sigma, { signed: false, unit: 'Gt per year' }).text
  const room = verdict === 'plausible'
    ? `its data leave room for it (${formatNumber(sigmasFromData, 1)} σ)`
    : verdict === 'unknown' ? 'its data have no error to hold it against' : `its data do not leave room for it (${formatNumber(sigmasFromData, 1)} σ)`
  return `${name} would have to ${extra.value < 0 ? 'lose' : 'gain'} ${amount} more than reported (${formatMeasured(reported.value, reported.sigma).text}); ${room}. `
    + `It would close ${length(closes.length)} mas per year of the drift and leave ${length(remains.length)}, and change the day by ${formatSigned(lod, Math.abs(lod) < 1 ? 2 : 1)} µs per year.`
}

