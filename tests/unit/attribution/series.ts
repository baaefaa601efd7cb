import { calendarMonth } from '../../../shared/earth/time/epochs.ts'
import { normals } from '../time/runFixtures.ts'

/** Middles of `count` calendar months from January 1990 on, MJD. */
export const monthMiddles = (count: number): number[] => Array.from({ length: count }, (_, i) => calendarMonth(1990 + Math.floor(i / 12), 1 + i % 12).middleMjd)

/** Stationary AR(1) noise of one-sigma `sigma`, repeatable. */
export function ar1Noise(count: number, phi: number, sigma: number, normal: () => number): number[] {
  let state = normal()
  return Array.from({ length: count }, (_, i) => {
    if (i > 0) state = phi * state + Math.sqrt(1 - phi * phi) * normal()
    return sigma * state
  })
}

export { normals }
