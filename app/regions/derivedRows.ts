import { decimalsFor, formatDirection, formatSigned, formatSignificant } from '#shared/format/numbers'
import { poleDirection, poleMmPerGt } from './sentences'
import type { RegionDetail } from './types'

export type Effect = RegionDetail['effects'][number]

/** Gigatonnes lost that the table speaks of. */
export const lostGt = 100

/** What a hundred gigatonnes lost do, a column for each ocean response. */
export function derivedRows(effects: readonly Effect[]): { name: string, unit: string, cells: string[] }[] {
  const row = (name: string, unit: string, pick: (effect: Effect) => number | null, factor = 1) => {
    const values = effects.map((effect) => {
      const value = pick(effect)
      return value === null ? null : -lostGt * factor * value
    })
    const largest = Math.max(...values.map(value => Math.abs(value ?? 0)))
    const decimals = Math.min(6, decimalsFor(largest, 3))
    return { name, unit, cells: values.map(value => formatSigned(value, decimals)) }
  }
  return [
    row('length of day', 'µs', e => e.lodMicroseconds),
    row('pole χ₁', 'mas', e => e.chi1Mas),
    row('pole χ₂', 'mas', e => e.chi2Mas),
    { name: 'shift of the pole', unit: 'cm', cells: effects.map(e => formatSignificant(poleMmPerGt(e) * lostGt / 10, 3)) },
    { name: 'towards', unit: '', cells: effects.map((e) => {
      const direction = poleDirection(e, -1)
      return formatDirection(direction === null ? null : { value: direction, sigma: null })
    }) },
    row('barystatic sea level', 'mm', e => e.barystaticMm),
    row('ΔJ₂', '10⁻¹¹', e => e.deltaJ2, 1e11),
    row('ΔC₂₁', '10⁻¹¹', e => e.deltaC21, 1e11),
    row('ΔS₂₁', '10⁻¹¹', e => e.deltaS21, 1e11),
    row('geocentre x, to 0°', 'mm', e => e.geocentreMm?.x ?? null),
    row('geocentre y, to 90°\u00a0E', 'mm', e => e.geocentreMm?.y ?? null),
    row('geocentre z, to north', 'mm', e => e.geocentreMm?.z ?? null),
  ]
}
