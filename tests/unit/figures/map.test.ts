import { geoArea, geoContains } from 'd3-geo'
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { landOf } from '../../../shared/figures/map/land.ts'
import { mapFigure } from '../../../shared/figures/map/mapFigure.ts'
import { latitudeReach, outlineForDrawing } from '../../../shared/figures/map/outline.ts'
import { expectSound } from './expectSound.ts'
import { sampleOutlines } from './sampleRun.ts'
import type { Outline, Position } from '../../../shared/types/domain.ts'

const land = landOf(JSON.parse(readFileSync('node_modules/world-atlas/land-110m.json', 'utf8')))
const polygon = (...ring: Position[]): Outline => ({ type: 'Polygon', coordinates: [ring] })
const rad = Math.PI / 180
/** Area of a longitude–latitude box on the unit sphere. */
const boxArea = (width: number, south: number, north: number) => width * rad * (Math.sin(north * rad) - Math.sin(south * rad))

describe('outlineForDrawing', () => {
  const cases: [string, Outline, number, Position][] = [
    ['a box', polygon([20, -10], [45, -10], [45, 15], [20, 15], [20, -10]), boxArea(25, -10, 15), [30, 0]],
    ['the same box the other way round', polygon([20, -10], [20, 15], [45, 15], [45, -10], [20, -10]), boxArea(25, -10, 15), [30, 0]],
    ['a box across the date line', polygon([170, 10], [-170, 10], [-170, 30], [170, 30], [170, 10]), boxArea(20, 10, 30), [180, 20]],
    ['the same with longitudes past 180', polygon([170, 10], [190, 10], [190, 30], [170, 30], [170, 10]), boxArea(20, 10, 30), [180, 20]],
    ['a ring round the pole', polygon([-180, 75], [-90, 75], [0, 75], [90, 75], [-180, 75]), boxArea(360, 75, 90), [10, 89]],
    ['the same closed along the pole', polygon([-180, 75], [180, 75], [180, 90], [-180, 90], [-180, 75]), boxArea(360, 75, 90), [10, 89]],
    ['a southern cap', polygon([-180, -75], [-180, -90], [180, -90], [180, -75], [0, -75], [-180, -75]), boxArea(360, -90, -75), [10, -89]],
    ['a wedge to the pole', polygon([20, 60], [60, 60], [60, 90], [20, 90], [20, 60]), boxArea(40, 60, 90), [40, 80]],
    ['more than half of the Earth', polygon([-170, -80], [0, -80], [170, -80], [170, 80], [0, 80], [-170, 80], [-170, -80]), boxArea(340, -80, 80), [0, 0]],
  ]
  it.each(cases)('encloses %s on the side that is meant', (_, outline, area, inside) => {
    const drawn = outlineForDrawing(outline)
    // Edges along a parallel are drawn as great circles of one degree: 1e-4 of the area near the pole.
    expect(geoArea(drawn) / area).toBeCloseTo(1, 3)
    expect(geoContains(drawn, [inside[0], inside[1]])).toBe(true)
  })
  it('leaves a hole open', () => {
    const holed: Outline = { type: 'Polygon', coordinates: [
      [[20, -10], [45, -10], [45, 15], [20, 15], [20, -10]], [[28, 0], [36, 0], [36, 8], [28, 8], [28, 0]],
    ] }
    const drawn = outlineForDrawing(holed)
    expect(geoArea(drawn)).toBeCloseTo(boxArea(25, -10, 15) - boxArea(8, 0, 8), 3)
    expect(geoContains(drawn, [32, 4])).toBe(false)
  })
  it('finds how far an outline reaches', () => {
    expect(latitudeReach(polygon([0, 10], [10, 10], [10, -72], [0, 10]))).toEqual({ north: 10, south: -72 })
  })
})

describe('mapFigure', () => {
  it.each([280, 340, 619, 620, 1000, 1400])('draws six regions soundly at %i px', (width) => {
    expectSound(mapFigure({ regions: sampleOutlines(), land, driftDegEast: -30 }, { width, theme: 'light', id: 'm' }))
  })
  it('draws crowded, nameless, tiny and empty accounts', () => {
    const small = (i: number): Outline => polygon([70 + i, 20], [70.4 + i, 20], [70.4 + i, 20.4], [70 + i, 20.4], [70 + i, 20])
    const crowd = Array.from({ length: 12 }, (_, i) => ({ name: `The great <upper> & lower basin of the "Halcyon" river ${i}`, geometry: small(i / 2), massGtPerYear: [0, null, 3, -3][i % 4]! }))
    for (const width of [340, 800]) {
      const figure = mapFigure({ regions: crowd, land }, { width, theme: 'dark', id: 'm' })
      expectSound(figure)
      // Every region is named, on the map or in the list below.
      expect(figure.labels.filter(label => label.text.startsWith('The great'))).toHaveLength(12)
      expectSound(mapFigure({ regions: [], land }, { width, theme: 'print', id: 'm' }))
    }
  })
  it('shows polar insets only where they are needed', () => {
    const circles = (regions: ReturnType<typeof sampleOutlines>) => mapFigure({ regions, land }, { width: 800, theme: 'light', id: 'm' }).svg.match(/<circle/g)?.length ?? 0
    const [north, south] = sampleOutlines()
    // Ground and rim of each inset.
    expect([circles([]), circles([north!]), circles([north!, south!])]).toEqual([0, 2, 4])
  })
  it('hatches loss and not gain', () => {
    const one = (mass: number) => mapFigure({ regions: [{ name: 'A', geometry: polygon([0, 0], [30, 0], [30, 30], [0, 0]), massGtPerYear: mass }], land }, { width: 600, theme: 'light', id: 'm' }).svg
    expect(one(-1)).toContain('fill="url(#m-loss)"')
    expect(one(1)).not.toContain('fill="url(#m-loss)"')
  })
})
