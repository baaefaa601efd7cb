import { describe, expect, it } from 'vitest'
import { basesOf, circularityWarnings } from '../../../shared/observed/circularity.ts'
import { isGravityTable, readGravityCoefficients } from '../../../shared/observed/gravityCoefficients.ts'
import { excitationFromGravity, gravityWarnings, observedFromGravity } from '../../../shared/observed/gravityExcitation.ts'
import type { GravityFields } from '../../../shared/observed/gravityTypes.ts'
import { gravityQuestions } from '../../../shared/observed/gravityTypes.ts'
import { InputError } from '../../../shared/types/issue.ts'
import type { PhysicsSettings } from '../../../shared/types/domain.ts'

const settings: PhysicsSettings = { ocean: 'uniform', coefficients: 'gross-2007', core: 'decoupled' }
const fields: GravityFields = {
  solidPoleTide: 'removed', oceanPoleTide: 'removed', permanentTide: 'zero-tide', meanPole: 'secular-2018', radiusM: 6371000, dealiasing: 'restored', axialLoadFactor: 0.695
}
const table = `mjd,dC20,dC21,dS21,sigma C20,sigma C21
55200,1e-11,2e-12,-3e-12,1e-12,5e-13
55230,2e-11,2.5e-12,-3.5e-12,1e-12,5e-13
55260,,3e-12,-4e-12,1e-12,5e-13
`

describe('a table of gravity coefficients', () => {
  it('is recognised by its names and read to the digit', () => {
    expect(isGravityTable(table)).toBe(true)
    expect(isGravityTable('date,x,y\n2010-01-01,1,2\n')).toBe(false)
    const series = readGravityCoefficients(table)
    expect([...series.mjd]).toEqual([55200, 55230, 55260])
    expect([...series.c21]).toEqual([2e-12, 2.5e-12, 3e-12])
    expect(series.c20[2]).toBeNaN()
    expect([...series.sigmaC21]).toEqual([5e-13, 5e-13, 5e-13])
    expect(series.sigmaS21.every(Number.isNaN)).toBe(true)
  })

  it('reads names from a comment, powers of ten from the names, and takes the mean off full values', () => {
    const text = `# a comment line of another kind
# year C20(1e-10) sigmaC20(1e-10)
2010.0 -4841694.5 0.3
2010.5 -4841693.5 0.3
`
    const series = readGravityCoefficients(text)
    expect(series.c20[0]!).toBeCloseTo(-0.5e-10, 16)
    expect(series.c20[1]!).toBeCloseTo(0.5e-10, 16)
    expect(series.sigmaC20[0]).toBe(0.3e-10)
    expect(series.understood.join(' ')).toContain('full values')
  })

  it('refuses units that cannot be, and tables without a coefficient', () => {
    expect(() => readGravityCoefficients(table.replaceAll('e-12', ''))).toThrow(InputError)
    expect(() => readGravityCoefficients('mjd,a\n55200,1\n')).toThrow(InputError)
  })
})

describe('excitation from gravity coefficients', () => {
  const series = readGravityCoefficients(table)

  it('marks the series as gravity and carries errors along', () => {
    const excitation = excitationFromGravity(series, fields, settings)
    expect(excitation.sigmaChi1Mas[0]! / Math.abs(excitation.chi1Mas[0]!)).toBeCloseTo(5e-13 / 2e-12, 12)
    const observed = observedFromGravity(excitation, series)
    expect([observed.from, observed.mjd.length, observed.xMas.every(Number.isNaN)]).toEqual(['gravity', 3, true])
  })

  it('states its factors and warns as its answers say', () => {
    expect(excitationFromGravity(series, fields, settings).stated.join(' ')).toContain('1.6080')
    expect(gravityWarnings(fields)).toEqual([])
    const codes = gravityWarnings({ ...fields, solidPoleTide: 'in', oceanPoleTide: 'in', dealiasing: 'not-restored', permanentTide: 'unknown' }).map(w => w.code)
    expect(codes).toEqual(['solid-pole-tide', 'ocean-pole-tide', 'permanent-tide', 'dealiasing-out'])
    expect(gravityWarnings({ ...fields, meanPole: 'linear-2003' }).map(w => w.code)).toEqual(['mean-pole'])
  })

  it('asks one question for each field and refuses answers that it does not know', () => {
    expect(gravityQuestions.map(q => q.field).sort()).toEqual(Object.keys(fields).sort())
    expect(() => excitationFromGravity(series, { ...fields, radiusM: 6371 }, settings)).toThrow(InputError)
    expect(() => excitationFromGravity(series, { ...fields, dealiasing: 'maybe' as 'restored' }, settings)).toThrow(InputError)
  })
})

describe('circularity', () => {
  it('reads notes on independence, and is not misled by “independent of”', () => {
    expect(basesOf('Mass from satellite gravimetry.')).toEqual(['gravimetry'])
    expect(basesOf('Invented; independent of gravimetry and of the pole.')).toEqual([])
    expect(basesOf('Altimetry; trend adjusted to the observed pole')).toEqual(['pole'])
    expect(basesOf('Altimetry of the pole')).toEqual([])
  })

  it('warns of gravimetry beside gravity, and of the pole beside the pole', () => {
    const regions = [{ key: 'a', name: 'A', bases: ['gravimetry'] as const }, { key: 'b', name: 'B', bases: ['pole'] as const }]
    expect(circularityWarnings('gravity', regions)).toMatchObject([{ code: 'circular-gravity', regions: ['a'] }])
    expect(circularityWarnings('rotation', regions)).toMatchObject([{ code: 'circular-pole', regions: ['b'] }])
  })
})
