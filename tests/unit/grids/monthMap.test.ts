import { describe, expect, it } from 'vitest'
import { monthMap } from '../../../shared/grids/monthMap.ts'
import { box } from './gridFixtures.ts'

const columns = 72
const latEdgesDeg = Array.from({ length: 37 }, (_, i) => -90 + 5 * i)
/** Each cell holds the longitude of its middle. */
const epoch = { latEdgesDeg, westDeg: 0, stepDeg: 5, columns, values: Array.from({ length: 36 * columns }, (_, i) => 2.5 + 5 * (i % columns)) }

describe('a month for the map', () => {
  it('is the whole grid where there is no outline', () => {
    expect(monthMap(epoch, [], 1e6)).toMatchObject({ columns, westDeg: 0, merged: 1, latEdgesDeg })
  })

  it('is the ground about an outline, across the first column of the file as well', () => {
    const map = monthMap(epoch, [box(-8, 10, 7, 20)], 1e6)
    expect(map.latEdgesDeg[0]).toBe(5)
    expect(map.latEdgesDeg.at(-1)).toBe(25)
    const lons = Array.from({ length: map.columns }, (_, j) => (map.westDeg + (j + 0.5) * map.stepDeg) % 360)
    expect(lons).toEqual(expect.arrayContaining([352.5, 357.5, 2.5, 7.5]))
    expect(map.values.slice(0, map.columns)).toEqual(lons)
    expect(map.columns).toBeLessThan(12)
  })

  it('merges cells into their mean where there are too many, values that are missing left out', () => {
    const holes = { ...epoch, values: epoch.values.map((v, i) => i === 0 ? Number.NaN : v) }
    const map = monthMap(holes, [], 700)
    expect(map.merged).toBe(2)
    expect(map.values).toHaveLength(18 * 36)
    // 7.5 alone in one row, 2.5 and 7.5 in the other.
    expect(map.values[0]).toBeCloseTo((7.5 + 2.5 + 7.5) / 3, 3)
    expect(map.latEdgesDeg).toHaveLength(19)
    expect(map.latEdgesDeg.at(-1)).toBe(90)
  })
})
