/** Quantities that are attributed: ΔLOD in µs, χ₁ and χ₂ in mas. */
export const rotationQuantities = ['lod', 'chi1', 'chi2'] as const
export type RotationQuantity = typeof rotationQuantities[number]

export const quantityNames: Readonly<Record<RotationQuantity, string>> = { lod: 'the length of day', chi1: 'χ₁', chi2: 'χ₂' }
export const quantityUnits: Readonly<Record<RotationQuantity, 'µs' | 'mas'>> = { lod: 'µs', chi1: 'mas', chi2: 'mas' }

/** One observable over time: its epochs and what was observed there less background and rest of the world. */
export interface ObservedBlock { quantity: RotationQuantity, mjd: Float64Array, value: Float64Array }

/** A region, or several taken together: what it does to each block, in the block's unit, on the block's epochs. */
export interface Group { key: string, name: string, signatures: Float64Array[] }

/** A named systematic error: what one sigma of it does to the residual of each block. */
export interface SourceLoading { source: string, loadings: Float64Array[] }

/** Observed rotation, the groups that are to explain it, and the errors that they share. */
export interface AttributionData {
  blocks: ObservedBlock[]
  groups: Group[]
  sources: SourceLoading[]
  /** Usual step between epochs, days. */
  stepDays: number
}
