import type { Ar1Noise } from '../../../shared/attribution/ar1.ts'
import type { AttributionData, RotationQuantity } from '../../../shared/attribution/types.ts'
import { rotationQuantities } from '../../../shared/attribution/types.ts'
import { ar1Noise, monthMiddles, normals } from './series.ts'

export interface World { data: AttributionData, truth: number[], noise: Record<RotationQuantity, Ar1Noise> }

/**
 * A made-up world: groups with trends, seasons and slow change of their own, seen in three observables with AR(1) noise, an offset, a
 * season that belongs to nobody and one systematic error; factors drawn from N(1, 0.5²).
 */
export function world(seed: number, { groups = 4, months = 120, strength = 1, seasonal = true } = {}): World {
  const shape = normals(77)
  const normal = normals(seed)
  const mjd = Float64Array.from(monthMiddles(months))
  const t = mjd.map((_, i) => (i - months / 2) / 12)
  // Signatures do not depend on the seed: every draw is of the same experiment.
  const masses = Array.from({ length: groups }, () => {
    let walk = 0
    const [rate, season, phase] = [8 * shape(), 6 * shape(), shape()]
    return t.map((years) => {
      walk += 1.2 * shape()
      return rate * years + walk + (seasonal ? season * Math.cos(2 * Math.PI * years + phase) : 0)
    })
  })
  const responses = masses.map(() => ({ lod: 0.02 * shape(), chi1: 0.012 * shape(), chi2: 0.012 * shape() }))
  const noise: Record<RotationQuantity, Ar1Noise> = { lod: { sigma: 0.6, phi: 0.7 }, chi1: { sigma: 0.3, phi: 0.5 }, chi2: { sigma: 0.3, phi: 0.3 } }
  const truth = masses.map(() => 1 + 0.5 * normal())
  const drift = normal()
  const loading = { lod: 0.08, chi1: 0.03, chi2: -0.02 }
  return {
    truth,
    noise,
    data: {
      stepDays: 30.4,
      groups: masses.map((mass, g) => ({ key: `g${g}`, name: `Group ${g}`, signatures: rotationQuantities.map(q => mass.map(m => strength * responses[g]![q] * m)) })),
      sources: [{ source: 'frame', loadings: rotationQuantities.map(q => t.map(years => loading[q] * years)) }],
      blocks: rotationQuantities.map((quantity) => {
        const e = ar1Noise(months, noise[quantity].phi, noise[quantity].sigma, normal)
        const [offset, season] = [5 * normal(), 2 * normal()]
        return {
          quantity, mjd,
          value: t.map((years, i) => offset + (seasonal ? season : 0) * Math.sin(2 * Math.PI * years + 0.3) + drift * loading[quantity] * years + e[i]!
            + masses.reduce((sum, mass, g) => sum + truth[g]! * strength * responses[g]![quantity] * mass[i]!, 0))
        }
      })
    }
  }
}
