/** What a file may hold in place of gigatonnes. */
export const quantities = ['mass', 'volume', 'water-height', 'head', 'ice-thickness', 'mass-rate', 'specific-balance'] as const
export type Quantity = typeof quantities[number]

/** What a conversion to gigatonnes still needs to be told. */
export type QuantityNeed = 'area' | 'density' | 'storage' | 'periods'

export interface QuantityKind {
  /** Word for screens and messages. */
  name: string
  /** Unit that values are turned into first, and from which the rest of the conversion goes on. */
  canonical: string
  /** Units that people type for it. */
  examples: string
  needs: readonly QuantityNeed[]
}

/** The quantities, each with its canonical unit and what its way to gigatonnes needs. */
export const quantityKinds: Record<Quantity, QuantityKind> = {
  'mass': { name: 'mass', canonical: 'Gt', examples: 'Gt, Mt, kg', needs: [] },
  'volume': { name: 'volume', canonical: 'km³', examples: 'km³, 10⁶ m³, acre-feet', needs: ['density'] },
  'water-height': { name: 'water-equivalent height', canonical: 'm w.e.', examples: 'mm, cm, m, kg/m²', needs: ['area'] },
  'head': { name: 'groundwater head change', canonical: 'm', examples: 'm, cm, ft', needs: ['storage', 'area'] },
  'ice-thickness': { name: 'ice thickness change', canonical: 'm', examples: 'm, cm', needs: ['density', 'area'] },
  'mass-rate': { name: 'mass rate', canonical: 'Gt/yr', examples: 'Gt/yr, Mt/month', needs: ['periods'] },
  'specific-balance': { name: 'specific mass balance', canonical: 'm w.e./yr', examples: 'm w.e./yr, mm w.e., kg/m²', needs: ['periods', 'area'] }
}

/** How a typed unit was understood, to be shown for confirmation before anything is stored. */
export interface UnderstoodUnit {
  quantity: Quantity
  /** As it was typed. */
  typed: string
  canonical: string
  /** Canonical units per typed unit. */
  factor: number
  /** For rates: the values are amounts over each row's period, not amounts per time. */
  perPeriod: boolean
  /** “Mm^3” is read as million cubic metres: 1 of them is 0.001 km³. */
  reading: string
}

/** Units that need no words: those that files name in their columns. */
export const plainUnits = {
  'Gt': { quantity: 'mass', typed: 'Gt', canonical: 'Gt', factor: 1, perPeriod: false, reading: 'Values are gigatonnes; 1 Gt is 1 km³ of fresh water.' },
  'mm-we': { quantity: 'water-height', typed: 'mm', canonical: 'm w.e.', factor: 1e-3, perPeriod: false, reading: 'Values are millimetres of water equivalent.' },
  'cm-we': { quantity: 'water-height', typed: 'cm', canonical: 'm w.e.', factor: 1e-2, perPeriod: false, reading: 'Values are centimetres of water equivalent.' }
} as const satisfies Record<string, UnderstoodUnit>
