import type { Ar1Noise } from './ar1.ts'
import { bandProjection, residualNoise } from './bandProjection.ts'
import type { FitBand } from './bandProjection.ts'
import { residualOf } from './scaling.ts'
import type { AttributionData, RotationQuantity } from './types.ts'

/** Signatures of groups in coordinates in which the noise of each observable is white and has unit variance. */
export interface Signatures {
  groups: { key: string, name: string }[]
  blocks: {
    quantity: RotationQuantity
    /** columns[g]: what group g does, in sigmas of the noise. */
    columns: Float64Array[]
    /** sources[s]: what one sigma of a shared error does. */
    sources: Float64Array[]
  }[]
}

/** Noise of each observable about the prediction as reported, as the estimates of attribution take it. */
export function noiseOf(data: AttributionData): Ar1Noise[] {
  const asReported = new Float64Array(data.groups.length).fill(1)
  return data.blocks.map((block, b) => residualNoise(block, residualOf(data, b, asReported), data.stepDays))
}

/** Signatures over the whole of space and time: every month of every observable, with a constant (and seasons, as the band says) out. */
export function seriesSignatures(data: AttributionData, noise: readonly Ar1Noise[] = noiseOf(data), band: FitBand = 'all', trend: 'in' | 'out' = 'in'): Signatures {
  return {
    groups: data.groups.map(({ key, name }) => ({ key, name })),
    blocks: data.blocks.map((block, b) => {
      const project = bandProjection(block, noise[b]!, data.stepDays, band, trend)
      return {
        quantity: block.quantity,
        columns: data.groups.map(({ signatures }) => project(signatures[b]!)),
        sources: data.sources.map(({ loadings }) => project(loadings[b]!))
      }
    })
  }
}

/** Rates of a group: µs and mas per Julian year. */
export interface GroupRates { key: string, name: string, rates: Partial<Record<RotationQuantity, number>> }

/** Signatures of trends alone, one number for each observable: their rank is three at most, two without the length of day. */
export function trendSignatures(groups: readonly GroupRates[], sigma: Partial<Record<RotationQuantity, number>>): Signatures {
  const quantities = (Object.keys(sigma) as RotationQuantity[]).filter(quantity => groups.every(group => group.rates[quantity] !== undefined))
  for (const quantity of quantities) if (!(sigma[quantity]! > 0)) throw new RangeError(`sigma of ${quantity} must be positive, got ${sigma[quantity]}`)
  return {
    groups: groups.map(({ key, name }) => ({ key, name })),
    blocks: quantities.map(quantity => ({ quantity, columns: groups.map(({ rates }) => Float64Array.of(rates[quantity]! / sigma[quantity]!)), sources: [] }))
  }
}
