import { describe, expect, it } from 'vitest'
import { fitTrend } from '#shared/earth/time/trend'
import { readAngularMomentum } from '#shared/observed/angularMomentum'
import { runChain } from '#shared/observed/chain'
import type { Chain, ChainQuantity } from '#shared/observed/chainTypes'
import { readGravityCoefficients } from '#shared/observed/gravityCoefficients'
import { parseObserved } from '#shared/observed/parse'
import { demoObservedCsv } from '../../../server/services/demoData'
import { demoFluidFields, demoFluidText, demoGravityCsv } from '../../../server/services/demoFluids'

describe('the demo’s air, sea and gravity', () => {
  const correction = (component: 'atmosphere' | 'ocean', seed: number) => ({
    name: component, source: 'invented', fields: demoFluidFields[component], series: readAngularMomentum(demoFluidText(component, 77, seed)),
  })
  const corrections = { air: correction('atmosphere', 200), sea: correction('ocean', 201) }
  const observed = parseObserved(demoObservedCsv(77))
  const fluid = (key: string) => ({ kind: 'angular-momentum' as const, on: true, correction: key, mass: true, motion: true, trend: false })
  const chain = (fluids: boolean): Chain => ({
    schemaVersion: 1, from: null, to: null, includePredictions: false,
    steps: [{ kind: 'zonal-tides', on: true, set: 'all' }, { kind: 'excitation', on: true, periodDays: 433, q: 179 }, ...(fluids ? [fluid('air'), fluid('sea')] : []), { kind: 'monthly', on: true }],
  })

  it('are read without a fault, on every day of the synthetic orientation', () => {
    for (const { series } of Object.values(corrections)) {
      expect(series.issues).toEqual([])
      expect([series.mjd[0], series.mjd.length]).toEqual([observed.mjd[0], observed.mjd.length])
    }
    const gravity = readGravityCoefficients(demoGravityCsv(300))
    expect(gravity.issues).toEqual([])
    // Twenty-one years less eleven months without a mission.
    expect(gravity.mjd.length).toBe(21 * 12 - 11)
  })

  it('take most of the season out of it, and neither its trend nor the water twice', () => {
    const [before, after] = [false, true].map(fluids => runChain(observed, chain(fluids), { corrections }))
    const annual = (result: typeof before, quantity: ChainQuantity) => {
      const { mjd, value } = result!.after[quantity]!
      const fit = fitTrend({ mjd, value })
      return Math.hypot(fit.coefficients[2]!, fit.coefficients[3]!)
    }
    for (const quantity of ['lod', 'chi1', 'chi2'] as const) expect(annual(after, quantity) / annual(before, quantity), quantity).toBeLessThan(0.5)
    expect(after!.trends.chi2!.value).toBeCloseTo(before!.trends.chi2!.value, 1)
    expect(after!.warnings.map(({ code }) => code)).toEqual([])
  })
})
