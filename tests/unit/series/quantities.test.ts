import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { understandUnit } from '../../../shared/series/quantities.ts'
import { quantities, type Quantity } from '../../../shared/series/quantityKinds.ts'
import { InputError } from '../../../shared/types/issue.ts'

function problem(text: string, quantity: Quantity): { code: string, message: string } {
  try {
    understandUnit(text, quantity)
  } catch (error) {
    if (error instanceof InputError) return error.issues[0]!
    throw error
  }
  throw new Error(`“${text}” was understood as ${quantity}`)
}

describe('units that people type', () => {
  it.each<[string, Quantity, number]>([
    ['gigatonnes', 'mass', 1],
    ['GT', 'mass', 1],
    ['billion tonnes', 'mass', 1],
    ['km^3', 'volume', 1],
    ['km3', 'volume', 1],
    ['cubic kilometers', 'volume', 1],
    ['Mm^3', 'volume', 1e-3],
    ['Mm³', 'volume', 1e-3],
    ['hm³', 'volume', 1e-3],
    ['MCM', 'volume', 1e-3],
    ['BCM', 'volume', 1],
    ['10^6 m3', 'volume', 1e-3],
    ['1e6 m³', 'volume', 1e-3],
    ['10⁶·m³', 'volume', 1e-3],
    ['million cubic metres', 'volume', 1e-3],
    ['mm w.e.', 'water-height', 1e-3],
    ['cm of water', 'water-height', 1e-2],
    ['cm EWH', 'water-height', 1e-2],
    ['mm H₂O', 'water-height', 1e-3],
    ['kg m⁻²', 'water-height', 1e-3],
    ['kg m-2', 'water-height', 1e-3],
    ['12,5 mm', 'water-height', 0.0125],
    ['0.1 mm', 'water-height', 1e-4],
    ['metres', 'head', 1],
    ['m ice', 'ice-thickness', 1],
    ['Gt per year', 'mass-rate', 1],
    ['Gt yr⁻¹', 'mass-rate', 1],
    ['Gt a-1', 'mass-rate', 1],
    ['Mt/month', 'mass-rate', 12e-3],
    ['m w.e. a⁻¹', 'specific-balance', 1],
    ['m w.e./yr', 'specific-balance', 1],
    ['mm w.e. yr-1', 'specific-balance', 1e-3],
    ['kg m⁻² yr⁻¹', 'specific-balance', 1e-3]
  ])('%s as %s', (text, quantity, factor) => {
    const unit = understandUnit(text, quantity)
    expect(unit.factor / factor).toBeCloseTo(1, 13)
    expect(unit.perPeriod).toBe(false)
    expect(unit.typed).toBe(text)
  })

  it('takes an annual balance without a time for the amount over each period', () => {
    expect(understandUnit('mm w.e.', 'specific-balance')).toMatchObject({ factor: 1e-3, perPeriod: true })
  })

  it('says what it read', () => {
    expect(understandUnit('Mm^3', 'volume').reading).toBe('“Mm^3” is read as million cubic metres: 1 of them is 0.001 km³.')
    expect(understandUnit('acre-ft', 'volume').reading).toBe('“acre-ft” is read as acre-feet: 1 of them is 1.23348\u202f×\u202f10⁻⁶ km³.')
    expect(understandUnit('Gt yr⁻¹', 'mass-rate').reading).toBe('“Gt yr⁻¹” is read as gigatonnes per year: 1 of them is 1 Gt/yr.')
    expect(understandUnit('kg/m²', 'water-height').reading).toBe('“kg/m²” is read as kilograms per square metre: 1 of them is 0.001 m w.e.')
  })

  it.each<[string, Quantity, string, string]>([
    ['km³', 'mass', 'unit-wrong-dimension', 'is a volume, but mass is in Gt, Mt, kg. Choose volume'],
    ['Gt/yr', 'mass', 'unit-wrong-dimension', 'is a mass rate'],
    ['Gt', 'mass-rate', 'unit-wrong-dimension', 'a rate is per time'],
    ['mm', 'volume', 'unit-wrong-dimension', 'is a length'],
    ['m²', 'head', 'unit-wrong-dimension', 'is an area'],
    ['m ice', 'water-height', 'unit-of-ice', 'Choose ice thickness change'],
    ['tons', 'mass', 'unit-ambiguous', '907 kg'],
    ['', 'mass', 'unit-missing', 'No unit was given'],
    ['furlongs of rain', 'water-height', 'unit-unknown', 'not understood'],
    ['kelvin', 'head', 'unit-wrong-dimension', 'something else']
  ])('refuses %s as %s', (text, quantity, code, part) => {
    const issue = problem(text, quantity)
    expect(issue.code).toBe(code)
    expect(issue.message).toContain(part)
  })

  it('either understands a text with a positive factor or refuses it with an issue', () => {
    const pieces = fc.array(fc.constantFrom('km', 'm', '³', '^3', '/', 'yr', '⁻¹', ' ', 'G', 't', '10⁶', ',', '(', 'w.e.', '-', '2', 'acre', 'ft', 'σ'), { maxLength: 6 })
    fc.assert(fc.property(pieces, fc.constantFrom(...quantities), (parts, quantity) => {
      try {
        expect(understandUnit(parts.join(''), quantity).factor).toBeGreaterThan(0)
      } catch (error) {
        expect(error).toBeInstanceOf(InputError)
        expect((error as InputError).issues).toHaveLength(1)
      }
    }), { numRuns: 60, seed: 5 })
  })
})
