import type { Covariance } from '../earth/time/covariance.ts'
import { formatNumber } from '../format/numbers.ts'
import type { BackgroundRow } from '../types/run.ts'
import { chiSquareTail } from './distributions.ts'
import { quadraticForm } from './metric.ts'
import type { RotationQuantity } from './types.ts'
import { quantityNames } from './types.ts'

/** Closure of a budget: quoted with χ² and its degrees of freedom, or not, with the reason. */
export type Closure =
  | { quoted: true, chiSquare: number, degreesOfFreedom: number, reduced: number, pValue: number, sentence: string }
  | { quoted: false, reason: string }

/** The two rows without which a closure means nothing. */
export interface ClosureRows { background: readonly BackgroundRow[], restOfWorld: BackgroundRow | null }

const fields: Readonly<Record<RotationQuantity, 'lodMsPerCentury' | 'chi1MasPerYear' | 'chi2MasPerYear'>> = {
  lod: 'lodMsPerCentury', chi1: 'chi1MasPerYear', chi2: 'chi2MasPerYear'
}

/**
 * Closure of observed − background − rest of the world − Σ regions: χ² = rᵀC⁻¹r with the full covariance, a diagonal and low-rank
 * factors. Quoted only where background and rest of the world are entered for every quantity that the residual is made of.
 *
 * @param residual n numbers: rates or months of the quantities
 * @param fitted parameters that were fitted to make the residual small
 */
export function closureOf(residual: ArrayLike<number>, covariance: Covariance, quantities: readonly RotationQuantity[], rows: ClosureRows, fitted = 0): Closure {
  const open = missingRows(quantities, rows)
  if (open) return { quoted: false, reason: open }
  const degreesOfFreedom = residual.length - fitted
  if (degreesOfFreedom < 1) return { quoted: false, reason: `${residual.length} values and ${fitted} fitted parameters leave no degree of freedom.` }
  const chiSquare = quadraticForm(covariance, residual)
  const pValue = chiSquareTail(chiSquare, degreesOfFreedom)
  const verdict = pValue < 0.01 ? 'the budget does not close within its errors' : pValue > 0.99 ? 'the budget closes better than its errors allow, which then are too large' : 'the budget closes within its errors'
  return {
    quoted: true, chiSquare, degreesOfFreedom, reduced: chiSquare / degreesOfFreedom, pValue,
    sentence: `χ² = ${formatNumber(chiSquare, 1)} for ${formatNumber(degreesOfFreedom)} degrees of freedom: ${verdict}.`
  }
}

/** Why no closure is quoted; null where both rows are there for every quantity. */
export function missingRows(quantities: readonly RotationQuantity[], { background, restOfWorld }: ClosureRows): string | null {
  const without = (has: (field: typeof fields[RotationQuantity]) => boolean): string => quantities.filter(q => !has(fields[q])).map(q => quantityNames[q]).join(', ')
  const noBackground = without(field => background.some(row => row[field] !== null))
  const noRest = without(field => (restOfWorld?.[field] ?? null) !== null)
  const parts = [
    ...(noBackground ? [`no background rate is entered for ${noBackground}`] : []),
    ...(noRest ? [`the rest of the world is not entered for ${noRest}`] : [])
  ]
  return parts.length === 0 ? null : `No closure is quoted: ${parts.join(', and ')}.`
}
