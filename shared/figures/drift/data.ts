import { driftOf } from './vector.ts'
import type { Comparison, RunResult } from '../../types/run.ts'
import type { DriftCovariance } from './vector.ts'

/** Rate of the pole, mas per year: χ̇₁ towards 0°, χ̇₂ towards 90° E. */
export interface DriftVector {
  name: string
  chi1: number
  chi2: number
}

export interface DriftItem extends DriftVector {
  /** Gt per year; its sign chooses loss or gain, 0 stands for background. */
  mass: number
}

export interface DriftData {
  items: DriftItem[]
  total: DriftVector & { covariance: DriftCovariance | null }
  /** The observed drift, drawn dashed from the origin. */
  observed: (DriftVector & { covariance: DriftCovariance | null }) | null
}

/** The drift of a run, with the observed one where a comparison holds both components. */
export function driftData(result: RunResult, comparison: Comparison | null = null): DriftData {
  const items = result.regions.flatMap(region => region.chi1MasPerYear && region.chi2MasPerYear && region.scale !== 0
    ? [{ name: region.name, chi1: region.chi1MasPerYear.value, chi2: region.chi2MasPerYear.value, mass: region.massGtPerYear?.value ?? 0 }]
    : [])
  const { chi1MasPerYear: chi1, chi2MasPerYear: chi2, driftCovariance } = result.total
  const seen = comparison?.chi1 && comparison.chi2 ? [comparison.chi1.trends.observed, comparison.chi2.trends.observed] as const : null
  return {
    items,
    total: { name: 'model', chi1: chi1?.value ?? 0, chi2: chi2?.value ?? 0, covariance: driftCovariance },
    observed: seen && {
      name: 'observed',
      chi1: seen[0].value,
      chi2: seen[1].value,
      covariance: { c11: seen[0].sigma ** 2, c12: 0, c22: seen[1].sigma ** 2 },
    },
  }
}

/** Length in mas per year and east longitude of a vector; null for none. */
export function polar({ chi1, chi2 }: { chi1: number, chi2: number }): { length: number, direction: number | null } {
  const exact = (value: number) => ({ value, sigmaWhite: 0, sigma: 0 })
  const drift = driftOf(exact(chi1), exact(chi2))
  return { length: drift.mas.value, direction: drift.direction?.value ?? null }
}

/** Semi-axes and orientation of a one-sigma ellipse; the angle is that of the longer axis from χ₁ towards χ₂, radians. */
export function ellipseOf({ c11, c12, c22 }: DriftCovariance): { a: number, b: number, angle: number } {
  const mean = (c11 + c22) / 2
  const spread = Math.hypot((c11 - c22) / 2, c12)
  return {
    a: Math.sqrt(Math.max(0, mean + spread)),
    b: Math.sqrt(Math.max(0, mean - spread)),
    angle: Math.atan2(2 * c12, c11 - c22) / 2,
  }
}

/** The same without what is not a number: such items are left out, such a sum stands at the origin. */
export function finiteDrift(data: DriftData): DriftData {
  const isFinite = ({ chi1, chi2 }: DriftVector) => Number.isFinite(chi1) && Number.isFinite(chi2)
  return {
    items: data.items.filter(isFinite),
    total: isFinite(data.total) ? data.total : { ...data.total, chi1: 0, chi2: 0, covariance: null },
    observed: data.observed && isFinite(data.observed) ? data.observed : null,
  }
}
