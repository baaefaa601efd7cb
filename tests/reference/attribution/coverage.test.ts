import { describe, expect, it } from 'vitest'
import { estimateScaling } from '../../../shared/attribution/scaling.ts'
import { world } from '../../unit/attribution/syntheticWorld.ts'

// The truth is drawn and known: the estimate must recover it as often as its one-sigma says. Noise is estimated, not given.
const SEEDS = 300
/** Three standard deviations of a share p of 300 draws. */
const band = (p: number): number => 3 * Math.sqrt(p * (1 - p) / SEEDS)

describe.each([['the data decide', 3], ['data and prior weigh alike', 0.5]] as const)('a world with known factors and AR(1) noise, where %s', (_, strength) => {
  const within = Array.from({ length: 4 }, () => ({ one: 0, two: 0, bias: 0, resolution: 0 }))
  let chiSquare = 0
  for (let seed = 1; seed <= SEEDS; seed++) {
    const { data, truth } = world(seed, { strength })
    const { factors, chiSquare: square, values } = estimateScaling(data, { band: 'interannual' })
    chiSquare += square / values / SEEDS
    factors.forEach(({ posterior, resolution }, g) => {
      const z = (posterior.value - truth[g]!) / posterior.sigma
      if (Math.abs(z) < 1) within[g]!.one += 1 / SEEDS
      if (Math.abs(z) < 2) within[g]!.two += 1 / SEEDS
      within[g]!.bias += z / SEEDS
      within[g]!.resolution += resolution / SEEDS
    })
  }

  it.each([0, 1, 2, 3])('covers the factor of group %i at 68.3 and 95.4 per cent, without bias', (g) => {
    expect(Math.abs(within[g]!.one - 0.683)).toBeLessThan(band(0.683))
    expect(Math.abs(within[g]!.two - 0.954)).toBeLessThan(band(0.954))
    expect(Math.abs(within[g]!.bias)).toBeLessThan(3 / Math.sqrt(SEEDS))
  })

  it('says how much the prior decides', () => {
    const least = Math.min(...within.map(w => w.resolution))
    const most = Math.max(...within.map(w => w.resolution))
    // The strongest signature is decided by the data, the weakest leaves much to the prior.
    if (strength === 3) expect(most).toBeGreaterThan(0.95)
    else expect(least).toBeLessThan(0.2)
    expect(most).toBeLessThanOrEqual(1)
    // Residuals of unit variance, less what constant, seasons and factors take.
    expect(Math.abs(chiSquare - 1)).toBeLessThan(0.1)
  })
})
