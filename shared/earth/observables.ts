/** A quantity that the engine answers: the one table behind API names, CSV headers, tables, charts and the report. */
export interface Observable {
  /** Name in the API and in code. */
  id: 'massGt' | 'chi1Mas' | 'chi2Mas' | 'chi3' | 'lodMicroseconds' | 'poleShiftMm' | 'poleDirectionDegEast' | 'barystaticMm' | 'deltaJ2'
  /** How it is written; `sub` is set below the line. */
  symbol: string
  sub?: string
  name: string
  unit: string
  /** Figures are shown as value × scale in `unit`. */
  scale: number
  positive: string
  negative: string
}

export const observables: readonly Observable[] = Object.freeze([
  { id: 'massGt', symbol: 'm', name: 'Mass change', unit: 'Gt', scale: 1, positive: 'mass gained', negative: 'mass lost' },
  { id: 'lodMicroseconds', symbol: 'ΔLOD', name: 'Change in length of day', unit: 'µs', scale: 1, positive: 'a longer day', negative: 'a shorter day' },
  { id: 'chi1Mas', symbol: 'χ', sub: '1', name: 'Excitation towards Greenwich', unit: 'mas', scale: 1, positive: 'the pole moves towards 0°', negative: 'the pole moves towards 180°' },
  { id: 'chi2Mas', symbol: 'χ', sub: '2', name: 'Excitation towards 90° E', unit: 'mas', scale: 1, positive: 'the pole moves towards 90° E', negative: 'the pole moves towards 90° W' },
  { id: 'chi3', symbol: 'χ', sub: '3', name: 'Axial excitation', unit: '10⁻¹²', scale: 1e12, positive: 'a slower spin', negative: 'a faster spin' },
  { id: 'poleShiftMm', symbol: '|χ|', name: 'Shift of the pole', unit: 'mm', scale: 1, positive: 'distance over the ground', negative: 'never negative' },
  { id: 'poleDirectionDegEast', symbol: 'λ', name: 'Direction of the pole', unit: '° E', scale: 1, positive: 'east of Greenwich', negative: 'west of Greenwich' },
  { id: 'barystaticMm', symbol: 'h', name: 'Barystatic sea level', unit: 'mm', scale: 1, positive: 'the sea rises', negative: 'the sea falls' },
  { id: 'deltaJ2', symbol: 'ΔJ', sub: '2', name: 'Change of the oblateness', unit: '10⁻¹²', scale: 1e12, positive: 'a flatter Earth', negative: 'a rounder Earth' }
] as const)
