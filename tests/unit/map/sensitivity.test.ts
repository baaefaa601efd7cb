import { describe, expect, it } from 'vitest'
import { overlayOf, overlayTexts, effectOf } from '../../../app/map/overlay/overlay'
import { overlaySentence } from '../../../app/map/overlay/overlaySentence'
import { mapSettings, overlayValues, sensitivityGrid } from '../../../app/map/overlay/sensitivityGrid'
import { sensitivityLines, splitAtCaps } from '../../../app/map/overlay/sensitivityLines'
import { loadEarthModel } from '../../../shared/earth/earthModel'
import { responseAtPlace } from '../../../shared/earth/pointResponse'
import type { OceanMode } from '../../../shared/types/domain'
import { shippedModel } from '../../reference/earth/shippedModel'

const atOnce = () => Promise.resolve()
const settings = (ocean: OceanMode) => ({ ocean, coefficients: 'gross-2007', core: 'decoupled' } as const)
const constant = loadEarthModel()
const grids = new Map<string, ReturnType<typeof sensitivityGrid>>()
const gridOf = (ocean: OceanMode) => {
  if (!grids.has(ocean)) grids.set(ocean, sensitivityGrid(constant, atOnce, settings(ocean)))
  return grids.get(ocean)!
}
const day = overlayOf('day', undefined)!
const pole = (towards: number) => overlayOf('pole', String(towards))!
/** Geocentric latitude, WGS 84: tan ψ = (1 − e²) tan φ. */
const psi = (latDeg: number) => Math.atan((1 - 0.00669437999014) * Math.tan(latDeg * Math.PI / 180))

describe('the address of an overlay', () => {
  it('names the kind and folds the longitude', () => {
    expect(overlayOf('day', '12')).toEqual({ kind: 'day', towardsDeg: 0 })
    expect(overlayOf('pole', '-180')).toEqual({ kind: 'pole', towardsDeg: 180 })
    expect(overlayOf('pole', 'x')).toEqual({ kind: 'pole', towardsDeg: -40 })
    expect(overlayOf('chi2', undefined)).toEqual({ kind: 'chi2', towardsDeg: 90 })
    expect(overlayOf('sideways', '3')).toBeNull()
    expect(overlayTexts(pole(-40)).title).toBe('Effect on the pole towards 40°\u00A0W')
  })
})

describe('lines of equal effect', () => {
  it('follow cos² ψ for the day where no ocean answers: parallels, none of them dashed', async () => {
    const { middle, lowest, highest } = sensitivityLines(await gridOf('none'), day)
    expect(Math.abs(lowest.position[1])).toBe(90)
    expect(highest.position[1]).toBe(0)
    expect(middle.length).toBeGreaterThan(8)
    for (const { level, sign, points } of middle) {
      expect(sign).toBe(1)
      // Linear between nodes of 2°: at most h²/8 · |f″| = (0.0349)²/8 · 2 of the whole, more than enough for rounding to hundredths of a degree.
      for (const [, lat] of points) expect(Math.abs(Math.cos(psi(lat)) ** 2 - level / highest.value)).toBeLessThan(5e-4)
    }
  })

  it('are where sin 2ψ is greatest for the pole, ±45° on the meridian it is measured along, and zero across it', async () => {
    const { middle, caps, lowest, highest } = sensitivityLines(await gridOf('none'), pole(-40))
    for (const { position: [lon, lat] } of [lowest, highest]) {
      expect(Math.abs(lat)).toBe(46)
      expect([-40, 140]).toContain(lon)
    }
    expect(lowest.value).toBeCloseTo(-highest.value, 10)
    const zero = [...middle, ...caps].filter(line => line.sign === 0).flatMap(line => line.points)
    expect(zero.length).toBeGreaterThan(200)
    for (const [lon, lat] of zero) {
      const onEquator = Math.abs(lat) < 0.02
      expect(onEquator || Math.abs(lat) > 89.9 || Math.min(Math.abs(lon - 50), Math.abs(lon + 130)) < 0.02).toBe(true)
    }
    expect(caps.some(({ points }) => points.some(([, lat]) => Math.abs(lat) > 88))).toBe(true)
  })

  it('turn with the longitude: towards 0° and 90° E are χ₁ and χ₂, and the opposite direction the opposite sign', async () => {
    const grid = await gridOf('uniform')
    expect(overlayValues(grid, pole(90))).toEqual(overlayValues(grid, overlayOf('chi2', undefined)!))
    const [there, back] = [overlayValues(grid, pole(20)), overlayValues(grid, pole(-160))]
    there.forEach((value, k) => expect(back[k]).toBeCloseTo(-value, 10))
  })

  it('hold the engine’s own value with the fingerprint fields, and none runs along ±180°', async () => {
    const model = await shippedModel()
    const grid = await sensitivityGrid(model, atOnce)
    expect(mapSettings(model).ocean).toBe('fingerprint')
    for (const overlay of [day, pole(-40), overlayOf('chi1', undefined)!, overlayOf('chi2', undefined)!]) {
      const { middle, caps, highest, lowest } = sensitivityLines(grid, overlay)
      const signs = new Set(middle.map(line => line.sign))
      expect([...signs].sort()).toEqual([-1, 0, 1])
      for (const { level, points } of [...middle, ...caps]) {
        points.forEach(([lon, lat], k) => {
          const value = effectOf(overlay, responseAtPlace(lon, lat, model, mapSettings(model)))
          // Bilinear at 2° beside coasts, where the field bends most: under a twentieth of the distance of two lines.
          expect(Math.abs(value - level)).toBeLessThan(4e-3 * (highest.value - lowest.value))
          const last = points[k - 1]
          if (last) expect(Math.abs(lon) === 180 && last[0] === lon).toBe(false)
        })
      }
    }
  }, 60_000)

  it('are cut at 85° and lose nothing there', () => {
    expect(splitAtCaps([[0, 80], [10, 90], [20, 80]])).toEqual([
      { inCap: false, points: [[0, 80], [5, 85]] }, { inCap: true, points: [[5, 85], [10, 90], [15, 85]] }, { inCap: false, points: [[15, 85], [20, 80]] },
    ])
    expect(splitAtCaps([[0, -86], [1, -86]])).toEqual([{ inCap: true, points: [[0, -86], [1, -86]] }])
  })
})

describe('the sentence', () => {
  it('gives the extremes of the field and what is along the heavy line', () => {
    const text = overlaySentence(day, { highest: { value: 0.0221, position: [94, 0] }, lowest: { value: -0.0424, position: [0, 90] } })
    expect(text).toBe('A gigatonne gained lengthens the day most on the equator at 94°\u00A0E, by 0.022 µs, and shortens it most at the north pole, by 0.042 µs; along the heavy line it leaves the day as it is.')
  })
})
