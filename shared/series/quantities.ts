import { create, unitDependencies } from 'mathjs'
import { formatScientific, formatSignificant } from '../format/numbers.ts'
import { InputError } from '../types/issue.ts'
import { quantityKinds } from './quantityKinds.ts'
import type { Quantity, UnderstoodUnit } from './quantityKinds.ts'
import { normaliseUnit } from './unitText.ts'
import type { UnitText } from './unitText.ts'

/** Powers of mass, length and time. */
type Dimension = readonly [mass: number, length: number, time: number]

/** A dimension that a quantity may have, SI units of it per canonical unit, and whether it is an amount over a row's period. */
interface Form { dimension: Dimension, siPerCanonical: number, perPeriod?: boolean }

/** Seconds of a Julian year, the year of every rate. */
const YEAR_S = 365.25 * 86_400
const length: Dimension = [0, 1, 0]
const perArea: Dimension = [1, -2, 0]

/** One kilogram per square metre is a millimetre of water: 1000 kg/m³ as everywhere here. */
const forms: Record<Quantity, Form[]> = {
  'mass': [{ dimension: [1, 0, 0], siPerCanonical: 1e12 }],
  'volume': [{ dimension: [0, 3, 0], siPerCanonical: 1e9 }],
  'water-height': [{ dimension: length, siPerCanonical: 1 }, { dimension: perArea, siPerCanonical: 1000 }],
  'head': [{ dimension: length, siPerCanonical: 1 }],
  'ice-thickness': [{ dimension: length, siPerCanonical: 1 }],
  'mass-rate': [{ dimension: [1, 0, -1], siPerCanonical: 1e12 / YEAR_S }],
  'specific-balance': [
    { dimension: [0, 1, -1], siPerCanonical: 1 / YEAR_S }, { dimension: [1, -2, -1], siPerCanonical: 1000 / YEAR_S },
    { dimension: length, siPerCanonical: 1, perPeriod: true }, { dimension: perArea, siPerCanonical: 1000, perPeriod: true }
  ]
}

const dimensionNames: [Dimension, string][] = [
  [[1, 0, 0], 'a mass'], [[0, 3, 0], 'a volume'], [length, 'a length'], [perArea, 'a mass per area'], [[1, 0, -1], 'a mass rate'],
  [[0, 1, -1], 'a length per time'], [[1, -2, -1], 'a mass per area and time'], [[0, 3, -1], 'a volume rate'], [[0, 2, 0], 'an area'],
  [[0, 0, 1], 'a time'], [[1, -3, 0], 'a density'], [[0, 0, 0], 'no dimension']
]

/**
 * What a typed unit means for a quantity: `km³`, `10⁶ m³`, `Gt/yr`, `m w.e. a⁻¹`, `acre-feet`. The reading is a sentence that is to be
 * confirmed by whoever typed it, since people write Mm³ for what SI calls hm³.
 *
 * @throws InputError for a text that is no unit, and for a unit of another dimension than the quantity's
 */
export function understandUnit(text: string, quantity: Quantity): UnderstoodUnit {
  const kind = quantityKinds[quantity]
  const fail = (code: string, message: string): never => {
    throw new InputError(message, [{ path: 'unit', code, value: text.slice(0, 60), message }])
  }
  let unit: UnitText
  try {
    unit = normaliseUnit(text)
  } catch (error) {
    if (!(error instanceof RangeError)) throw error
    return fail('unit-ambiguous', `${error.message}.`)
  }
  if (unit.expression === '') return fail('unit-missing', `No unit was given. ${kind.name[0]!.toUpperCase()}${kind.name.slice(1)} can be in ${kind.examples}.`)
  if (!(unit.multiplier > 0) || !Number.isFinite(unit.multiplier)) return fail('unit-not-positive', `The number before the unit must be positive, got “${text.trim()}”.`)
  if (unit.of === 'ice' && quantity !== 'ice-thickness') {
    return fail('unit-of-ice', `“${text.trim()}” is of ice. Choose ice thickness change, which takes its density into account.`)
  }
  const parsed = parse(unit.expression)
  if (!parsed) return fail('unit-unknown', `“${text.trim()}” is not understood as a unit. ${kind.name[0]!.toUpperCase()}${kind.name.slice(1)} can be in ${kind.examples}.`)
  const form = forms[quantity].find(({ dimension }) => same(dimension, parsed.dimension))
  if (!form) {
    const is = dimensionNames.find(([dimension]) => same(dimension, parsed.dimension))?.[1] ?? 'something else'
    return fail('unit-wrong-dimension', `“${text.trim()}” is ${is}, but ${kind.name} is in ${kind.examples}${hint(quantity, is)}.`)
  }
  const factor = unit.multiplier * parsed.si / form.siPerCanonical
  const perPeriod = form.perPeriod ?? false
  return { quantity, typed: text.trim(), canonical: kind.canonical, factor, perPeriod, reading: sentence(text.trim(), unit, kind.canonical, factor, perPeriod) }
}

function sentence(typed: string, unit: UnitText, canonical: string, factor: number, perPeriod: boolean): string {
  const shown = Math.abs(factor) >= 1e-4 && Math.abs(factor) < 1e7 ? trimmed(formatSignificant(factor, 6)) : formatScientific(factor, 5)
  const inTheirWords = unit.words ?? unit.expression
  const amount = perPeriod ? `${inTheirWords} over the period of each row` : inTheirWords
  const end = (perPeriod ? canonical.replace('/yr', '') : canonical).replace(/\.?$/, '.')
  return `“${typed}” is read as ${amount}: 1 of them is ${shown} ${end}`
}

/** Zeros behind the last digit that says something: 0.00100000 is 0.001. */
function trimmed(text: string): string {
  return text.includes('.') ? text.replace(/\.?0+$/, '') : text
}

function hint(quantity: Quantity, is: string): string {
  if (is === 'a volume' && quantity === 'mass') return '. Choose volume, and give its density'
  if (is === 'a mass' && quantity === 'volume') return '. Choose mass'
  if (is === 'a mass' && quantity === 'mass-rate') return '. Choose mass for amounts at epochs; a rate is per time'
  if (is === 'a mass rate' && quantity === 'mass') return '. Choose mass rate, which is integrated over the periods of the rows'
  if ((is === 'a length per time' || is === 'a mass per area and time') && quantity === 'water-height') return '. Choose specific mass balance, which is integrated over the periods of the rows'
  if ((is === 'a length' || is === 'a mass per area') && (quantity === 'mass' || quantity === 'volume')) return '. Choose water-equivalent height, which becomes mass over the area of the region'
  return ''
}

function parse(expression: string): { si: number, dimension: Dimension } | null {
  try {
    const { unit } = create(unitDependencies!)
    const parsed = unit(`1 ${expression}`)
    const [mass, len, time, ...others] = (parsed as unknown as { dimensions: number[] }).dimensions
    if (others.some(power => power !== 0)) return { si: Number.NaN, dimension: [Number.NaN, 0, 0] }
    return { si: parsed.toSI().toJSON().value as number, dimension: [mass!, len!, time!] }
  } catch {
    // The parser says no by throwing; its words are about its own grammar.
    return null
  }
}

function same(a: Dimension, b: Dimension): boolean {
  return a[0] === b[0] && a[1] === b[1] && a[2] === b[2]
}
