import { describe, expect, it } from 'vitest'
import { calendarMonth } from '../../../shared/earth/time/epochs.ts'
import { trendNoise } from '../../../shared/earth/time/trendNoise.ts'
import { normals } from './runFixtures.ts'

describe('trends of calendar months under noise', () => {
  it('are on a grid however long the record, since months do not run away from the calendar', () => {
    const normal = normals(11)
    for (const years of [4, 21, 60]) {
      const mjd = Array.from({ length: 12 * years }, (_, i) => calendarMonth(1962 + Math.floor(i / 12), i % 12 + 1).middleMjd)
      let state = 0
      const value = mjd.map(t => 0.02 * (t - mjd[0]!) / 365.25 + (state = 0.8 * state + normal()))
      const { models, sentence } = trendNoise({ mjd, value })
      expect(models.map(({ model }) => model), `${years} years`).toEqual(['white', 'ar1', 'power-law'])
      expect(sentence).not.toMatch(/irregular/)
      if (years === 60) {
        expect(models[1]!.parameter!).toBeCloseTo(0.8, 1)
        expect(models[1]!.sigma).toBeGreaterThan(2 * models[0]!.sigma)
      }
    }
  })

  it('are refused a grid where the epochs lie on none', () => {
    const mjd = Array.from({ length: 80 }, (_, i) => 50000 + 30 * i + 13 * (i % 3))
    expect(trendNoise({ mjd, value: mjd.map((_, i) => i % 7) }).sentence).toMatch(/irregular/)
  })
})
