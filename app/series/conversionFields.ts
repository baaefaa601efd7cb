import { correctionKinds, densities, type CorrectionKind, type Material } from '#shared/series/recipe'
import { quantityKinds, type Quantity } from '#shared/series/quantityKinds'
import type { ConversionChoice } from '#shared/series/conversionChoice'
import type { MassUnit } from '#shared/series/massUnits'

/** A rate to be taken off, as typed. */
export interface CorrectionField { on: boolean, what: CorrectionKind, name: string, rate: string, sigma: string, shared: boolean }
export const correctionTexts: Record<CorrectionKind, string> = {
  'isostatic': 'isostatic adjustment', 'surface-water': 'surface water', 'soil-water': 'soil water', 'snow': 'snow', 'leakage': 'leakage', 'other': 'another correction',
}
export const blankCorrection = (): CorrectionField => ({ on: true, what: 'isostatic', name: '', rate: '', sigma: '', shared: true })

/** A stored version of another series to be taken off, and the longest distance of its epochs that is gone between. */
export interface SubtractField { on: boolean, what: CorrectionKind, versionId: string, maxGapDays: string }
export const blankSubtract = (): SubtractField => ({ on: true, what: 'surface-water', versionId: '', maxGapDays: '62' })

/** A conversion as it stands in the fields of a form. */
export interface ConversionFields {
  quantity: Quantity
  unit: string
  material: Material
  density: string
  densitySigma: string
  densitySource: string
  coefficient: 'specific-yield' | 'storativity'
  storage: string
  storageSigma: string
  storageSource: string
  areaSigma: string
  corrections: CorrectionField[]
  subtract: SubtractField[]
}
type TextField = Exclude<keyof ConversionFields, 'corrections' | 'subtract'>
/** Faults by field; those of the corrections by their place: `corrections/0`, `subtract/0`. */
export type ConversionFaults = Partial<Record<TextField | `corrections/${number}` | `subtract/${number}`, string>>

export const materialNames: Record<Material, string> = {
  water: 'fresh water', ice: 'ice', glacier: 'glacier volume change', firn: 'firn', snow: 'snow', own: 'own value',
}
/** Materials that make sense for a quantity. */
export const materialsFor: Partial<Record<Quantity, readonly Material[]>> = {
  'volume': ['water', 'ice', 'glacier', 'own'], 'ice-thickness': ['glacier', 'ice', 'firn', 'snow', 'own'],
}

const figure = (value: number) => String(value)

/** Density, its one-sigma and the source of that error, as offered for a material; an own value keeps what stands in the fields. */
export function withMaterial(fields: ConversionFields, material: Material): ConversionFields {
  if (material === 'own') return { ...fields, material, densitySource: '' }
  const { value, sigma, source } = densities[material]
  return { ...fields, material, density: figure(value), densitySigma: figure(sigma), densitySource: source ?? '' }
}

/** Another quantity keeps what can be kept; its density is the one that it usually has. */
export function withQuantity(fields: ConversionFields, quantity: Quantity): ConversionFields {
  const offered = materialsFor[quantity]
  const next = { ...fields, quantity }
  return offered && !offered.includes(fields.material) ? withMaterial(next, offered[0]!) : next
}

const plainTexts: Record<MassUnit, [Quantity, string]> = { 'Gt': ['mass', 'Gt'], 'mm-we': ['water-height', 'mm'], 'cm-we': ['water-height', 'cm'] }

/** What stands in brackets at the end of a column's name, or behind its last underscore: “volume (10⁶ m³)”, “head_m”. */
export function unitInName(name: string): string {
  return (/[([]([^()[\]]+)[)\]]\s*$/.exec(name)?.[1] ?? /_([a-zµ³²0-9^/.]+)$/i.exec(name)?.[1] ?? '').trim()
}

/** What a column's name says of its quantity, for a start that is to be confirmed. */
export function quantityInName(name: string): Quantity | null {
  const unit = unitInName(name)
  if (/head|piezo|water[ _-]?level|water[ _-]?table|pegel/i.test(name)) return 'head'
  if (/thick|elevation|dh\b/i.test(name)) return 'ice-thickness'
  if (/balance/i.test(name)) return 'specific-balance'
  if (/(?:gt|mt|kg)\s*(?:\/|per|a\b|yr|year)/i.test(unit)) return 'mass-rate'
  if (/(?:m\^?3|m³|km³|acre|litre|liter|mcm|bcm|taf|maf)/i.test(unit) || /volume|storage[ _-]?volume/i.test(name)) return 'volume'
  return null
}

/** Fields to begin with: what the column's name says, else the plain unit that was read. */
export function firstFields(columnName: string, unit: MassUnit): ConversionFields {
  const said = quantityInName(columnName)
  const [quantity, text] = said ? [said, unitInName(columnName)] : plainTexts[unit]
  const empty: ConversionFields = {
    quantity: 'mass', unit: text, material: 'water', density: '', densitySigma: '', densitySource: '',
    coefficient: 'specific-yield', storage: '', storageSigma: '', storageSource: '', areaSigma: '', corrections: [], subtract: [],
  }
  return withQuantity(withMaterial(empty, 'water'), quantity)
}

/** A kept draft's fields; null where they are none. */
export function fieldsOfDraft(kept: unknown): ConversionFields | null {
  const fields = kept as ConversionFields | null
  if (!fields || typeof fields !== 'object' || !(fields.quantity in quantityKinds)) return null
  const { corrections, subtract: series, ...texts } = fields
  if (!Object.values(texts).every(value => typeof value === 'string') || !Array.isArray(corrections)) return null
  const whole = (c: CorrectionField) => correctionKinds.includes(c?.what) && [c.name, c.rate, c.sigma].every(text => typeof text === 'string')
  const named = (s: SubtractField) => correctionKinds.includes(s?.what) && [s.versionId, s.maxGapDays].every(text => typeof text === 'string')
  return { ...fields, corrections: corrections.filter(whole), subtract: Array.isArray(series) ? series.filter(named) : [] }
}

/** The choice that the fields hold, or what is wrong with them, field by field. Ranges are checked where the recipe is made. */
export function readConversion(fields: ConversionFields, readNumber: (text: string) => number | null): { choice: ConversionChoice | null, faults: ConversionFaults } {
  const faults: ConversionFaults = {}
  const { needs } = quantityKinds[fields.quantity]
  const number = (key: TextField, missing: string | null): number => {
    const value = readNumber(fields[key])
    if (value === null && missing === null) return 0
    if (value === null) faults[key] = missing!
    else if (!Number.isFinite(value)) faults[key] = `“${fields[key].trim()}” is not a number.`
    else if (value < 0) faults[key] = 'A negative number has no meaning here.'
    return value ?? 0
  }
  if (fields.unit.trim() === '') faults.unit = `Give the unit of the values: ${quantityKinds[fields.quantity].examples}.`
  const source = (text: string) => text.trim() || null
  const choice: ConversionChoice = { quantity: fields.quantity, unit: fields.unit.trim() }
  if (needs.includes('density')) {
    choice.density = { material: fields.material, value: number('density', 'Give the density.'), sigma: number('densitySigma', 'Give its one-sigma; 0 where none is known.'), source: source(fields.densitySource) }
  }
  if (needs.includes('storage')) {
    choice.storage = { coefficient: fields.coefficient, value: number('storage', 'Give it as a fraction, such as 0.12.'), sigma: number('storageSigma', 'Give its one-sigma; 0 where none is known.'), source: source(fields.storageSource) }
  }
  if (needs.includes('area')) {
    const sigmaKm2 = number('areaSigma', null)
    if (sigmaKm2 > 0) choice.area = { sigmaKm2, source: null }
  }
  if (fields.corrections.length) choice.corrections = fields.corrections.map((correction, i) => readCorrection(correction, readNumber, (fault) => { faults[`corrections/${i}`] = fault }))
  if (fields.subtract.length) {
    choice.subtract = fields.subtract.map(({ on, what, versionId, maxGapDays }, i) => {
      const days = readNumber(maxGapDays)
      if (!versionId) faults[`subtract/${i}`] = 'Choose the series that is taken off.'
      else if (days === null || !Number.isInteger(days) || days < 1 || days > 2000) faults[`subtract/${i}`] = 'The longest distance of epochs is whole days from 1 to 2000.'
      return { on, what, versionId, maxGapDays: days ?? 62 }
    })
  }
  return { choice: Object.keys(faults).length ? null : choice, faults }
}

function readCorrection({ on, what, name, rate, sigma, shared }: CorrectionField, readNumber: (text: string) => number | null, fault: (text: string) => void) {
  const [value, error] = [readNumber(rate), readNumber(sigma)]
  if (name.trim() === '') fault('Name the model or the series that the rate is from.')
  else if (value === null || error === null) fault(`The ${value === null ? 'rate' : 'one-sigma'} is missing.`)
  else if (!Number.isFinite(value) || !Number.isFinite(error)) fault(`“${(Number.isFinite(value) ? sigma : rate).trim()}” is not a number.`)
  else if (error < 0) fault('A one-sigma is not negative.')
  return { on, what, name: name.trim(), gtPerYear: { value: value ?? 0, sigma: error ?? 0, source: shared ? name.trim() : null } }
}

/** Field that an issue of the conversion is about. */
export function fieldOfIssue(path: string | undefined): keyof ConversionFaults {
  if (path?.startsWith('subtract/')) return path as `subtract/${number}`
  if (path === 'density/sigma') return 'densitySigma'
  if (path === 'storage/sigma') return 'storageSigma'
  if (path === 'area/sigma') return 'areaSigma'
  if (path?.startsWith('density')) return 'density'
  if (path?.startsWith('storage')) return 'storage'
  return 'unit'
}
