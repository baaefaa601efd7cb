import { geoContains } from 'd3-geo'
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { landOf, landWithoutSeas } from '../../../shared/figures/map/land.ts'
import { contourLines } from '../../../shared/figures/seaLevel/contourLines.ts'
import { contourLevels, roundUp } from '../../../shared/figures/seaLevel/levels.ts'
import { seaLevelContours, smoothed } from '../../../shared/figures/seaLevel/seaLevelContours.ts'
import { seaLevelFacts } from '../../../shared/figures/seaLevel/seaLevelFacts.ts'
import { seaLevelFigure } from '../../../shared/figures/seaLevel/seaLevelFigure.ts'
import { boxesMeet } from '../../../shared/figures/layout.ts'
import { seaLevelSentence } from '../../../shared/text/seaLevel.ts'
import { expectSound, readSvg } from './expectSound.ts'
import { sampleOutlines } from './sampleRun.ts'
import type { SeaLevelField } from '../../../shared/figures/seaLevel/levels.ts'
import type { Outline, Position } from '../../../shared/types/domain.ts'

const land = landOf(JSON.parse(readFileSync('node_modules/world-atlas/land-110m.json', 'utf8')))
const rad = Math.PI / 180

/** A field on nodes of 2°, all of it sea. */
function fieldOf(value: (lon: number, lat: number) => number, sea = 1): SeaLevelField {
  const latitudesDeg = Array.from({ length: 91 }, (_, i) => -90 + 2 * i)
  const longitudesDeg = Array.from({ length: 181 }, (_, j) => -180 + 2 * j)
  const nodes = latitudesDeg.flatMap(lat => longitudesDeg.map((lon): [number, number] => [lon, lat]))
  return { latitudesDeg, longitudesDeg, value: nodes.map(([lon, lat]) => value(lon, lat)), sea: nodes.map(() => sea) }
}

/** Angle from a place, degrees. */
const from = (lon0: number, lat0: number) => (lon: number, lat: number) =>
  Math.acos(Math.min(1, Math.max(-1, Math.sin(lat * rad) * Math.sin(lat0 * rad) + Math.cos(lat * rad) * Math.cos(lat0 * rad) * Math.cos((lon - lon0) * rad)))) / rad
/** A made-up fingerprint: a deep fall round a place, a gentle rise far away. */
const wellAt = (lon0: number, lat0: number) => {
  const angle = from(lon0, lat0)
  return (lon: number, lat: number) => 1.2 - 14 * Math.exp(-angle(lon, lat) / 9)
}
const well = fieldOf(wellAt(-41, 74))

const isRound = (level: number) => level === 0 || /^[1-9]\d?e/.test((Math.abs(level)).toExponential().replace('.', ''))

describe('contour levels', () => {
  it('rounds up to 1, 2 and 5', () => {
    expect([0.011, 0.02, 0.021, 0.3, 0.51, 1, 7, 12, 49].map(roundUp)).toEqual([0.02, 0.02, 0.05, 0.5, 1, 1, 10, 20, 50])
  })

  it('are round, in order, inside the field, with zero where it changes sign', () => {
    for (const factor of [1, 1e-4, 37, -1, -2.3e5]) {
      const field = fieldOf((lon, lat) => factor * wellAt(30, 10)(lon, lat))
      const levels = contourLevels(field)
      expect(levels.length).toBeGreaterThan(5)
      expect(levels.length).toBeLessThan(18)
      expect(levels.filter(level => !isRound(level))).toEqual([])
      expect([...levels].sort((a, b) => a - b)).toEqual(levels)
      expect(levels).toContain(0)
      const [low, high] = [Math.min(...field.value), Math.max(...field.value)]
      expect(levels.every(level => level > low && level < high)).toBe(true)
    }
  })

  it('step evenly where most of the sea lies and double beside the source', () => {
    const levels = contourLevels(well)
    const rising = levels.filter(level => level > 0)
    const steps = rising.slice(1).map((level, i) => level - rising[i]!)
    expect(Math.max(...steps)).toBeCloseTo(Math.min(...steps), 9)
    const falling = levels.filter(level => level < -1).reverse()
    falling.slice(1).forEach((level, i) => expect(level / falling[i]!).toBeGreaterThanOrEqual(2))
    expect(Math.min(...levels)).toBeLessThan(-4)
  })

  it('are none for a flat field and for one without sea', () => {
    expect(contourLevels(fieldOf(() => 0.3))).toEqual([])
    expect(contourLevels(fieldOf(() => 0))).toEqual([])
    expect(contourLevels(fieldOf(wellAt(0, 0), 0))).toEqual([])
  })
})

describe('contour lines', () => {
  const steps = (lines: { points: Position[] }[]) => lines.flatMap(({ points }) => points.slice(1).map((to, i) => [points[i]!, to] as const))

  it.each([
    ['a well at the antimeridian', wellAt(180, 20)],
    ['a well at the pole', wellAt(0, 90)],
    ['a well at the other pole', wellAt(20, -90)],
    ['a level that is met on the antimeridian itself', (lon: number) => -Math.abs(lon + 180) * Math.abs(180 - lon) / 1e4],
    ['a level that is met at the pole itself', (_: number, lat: number) => lat - 90],
  ])('never run along ±180° or a pole: %s', (_, value) => {
    const field = fieldOf(value)
    const lines = contourLines(field, [...contourLevels(field), 0])
    expect(lines.length).toBeGreaterThan(0)
    for (const [[lon0, lat0], [lon1, lat1]] of steps(lines)) {
      expect(Math.abs(lon0) === 180 && lon0 === lon1).toBe(false)
      expect(Math.abs(lat0) === 90 && lat0 === lat1).toBe(false)
      // Neighbours in the grid: nothing is joined across the map.
      expect(Math.hypot(lon1 - lon0, lat1 - lat0)).toBeLessThan(4)
      expect(lon0 === lon1 && lat0 === lat1).toBe(false)
    }
  })

  it('meet their level, and one another at the antimeridian', () => {
    const angle = from(180, 20)
    const lines = contourLines(fieldOf(angle), [30, 60])
    for (const { level, points } of lines) for (const [lon, lat] of points) expect(Math.abs(angle(lon, lat) - level)).toBeLessThan(0.1)
    const ends = lines.filter(({ level }) => level === 30).flatMap(({ points }) => [points[0]!, points.at(-1)!])
    expect(ends.map(([lon]) => Math.abs(lon))).toEqual(ends.map(() => 180))
    const latitudes = (side: number) => ends.filter(([lon]) => lon === side).map(([, lat]) => lat).sort((a, b) => a - b)
    expect(latitudes(180)).toEqual(latitudes(-180))
    expect(latitudes(180)).toHaveLength(2)
  })

  it('leave out ripples on flat ground, and keep a source of the same size', () => {
    const rippled = fieldOf((lon, lat) => lat / 10 + (Math.hypot(lon - 40, lat - 10.5) < 2 ? 0.08 : 0))
    const count = (field: SeaLevelField) => contourLines(field, [0, 1, 2]).filter(({ level }) => level === 1).length
    expect(count(fieldOf((_, lat) => lat / 10))).toBe(1)
    expect(count(rippled)).toBe(1)
    expect(count(fieldOf((lon, lat) => lat / 10 + (Math.hypot(lon - 40, lat + 30) < 2 ? 8 : 0)))).toBe(2)
  })
})

describe('seaLevelContours', () => {
  it('gives the mean its own line, and no round level runs beside it', () => {
    const { lines, levels } = seaLevelContours(well, 0.95)
    expect(lines.some(({ level }) => level === 0.95)).toBe(true)
    expect(levels).not.toContain(1)
    expect(levels).toContain(0.5)
    expect(seaLevelContours(well, 0.7).levels).toContain(0.5)
    expect(seaLevelContours(well, null).levels).toContain(1)
    const relative = seaLevelContours(well, 1)
    expect(relative.lines.filter(({ level }) => level === 1).length).toBe(contourLines(well, [1]).length)
  })
})

describe('smoothing', () => {
  it('takes out what changes sign from node to node and leaves planes and waves', () => {
    const flicker = smoothed(fieldOf((lon, lat) => (lon / 2 + lat / 2) % 2 === 0 ? 1 : -1))
    const inner = flicker.value.slice(181, -181)
    expect(Math.max(...inner.map(Math.abs))).toBeLessThan(1e-12)
    const plane = fieldOf((_, lat) => 3 - lat / 50)
    smoothed(plane).value.slice(181, -181).forEach((value, i) => expect(value).toBeCloseTo(plane.value[i + 181]!, 12))
    const wave = fieldOf(lon => Math.cos(2 * lon * rad))
    // cos 2λ on nodes of 2° keeps (1 + cos 4°)/2 of its height, across the antimeridian too.
    smoothed(wave).value.forEach((value, i) => expect(value).toBeCloseTo(wave.value[i]! * (1 + Math.cos(4 * rad)) / 2, 12))
  })

  it('fills the Caspian and leaves every other coast', () => {
    const atlas: unknown = JSON.parse(readFileSync('node_modules/world-atlas/land-110m.json', 'utf8'))
    const [open, filled] = [landOf(atlas), landWithoutSeas(atlas)]
    expect([geoContains(open, [51, 41]), geoContains(filled, [51, 41])]).toEqual([false, true])
    for (const place of [[0, 0], [-100, 40], [0, -85], [90, 60], [-150, 20]] as [number, number][]) expect(geoContains(filled, place)).toBe(geoContains(open, place))
  })
})

describe('seaLevelFigure', () => {
  const regions = sampleOutlines()
  const contours = seaLevelContours(fieldOf((lon, lat) => wellAt(-41, 74)(lon, lat) - 5 * Math.exp(-from(-105, -76)(lon, lat) / 8)), 1.05)
  const places = [{ mark: '1', position: [-9, 38] as Position }, { mark: '2', position: [180, -17] as Position }, { mark: '3', position: [0, -90] as Position }]
  const data = { contours, unit: 'mm per year', regions, places, land, description: 'The sea rises.' }

  it.each([280, 340, 619, 620, 1000, 1400])('draws soundly at %i px, its labels off one another', (width) => {
    const figure = seaLevelFigure(data, { width, theme: 'light', id: 's' })
    expectSound(figure)
    figure.labels.forEach((a, i) => figure.labels.slice(i + 1).forEach(b => expect(boxesMeet(a, b, -0.5), `“${a.text}” and “${b.text}”`).toBe(false)))
  })

  it('labels every round level, the mean and every place', () => {
    const texts = seaLevelFigure(data, { width: 1100, theme: 'light', id: 's' }).labels.map(({ text }) => text)
    expect(texts).toContain('mean 1.05')
    expect(texts).toContain('mean 1.05 mm per year')
    expect(texts).toContain('0')
    expect(texts.filter(text => /^[123]$/.test(text)).length).toBeGreaterThanOrEqual(3)
    expect(contours.levels.filter(level => level < 0 && level > -4).length).toBeGreaterThan(2)
    for (const level of contours.levels.filter(l => l < 0 && l > -4)) expect(texts).toContain(`−${Math.abs(level)}`)
    expect(texts).toEqual(expect.arrayContaining(['the sea falls', 'no change', 'rises more than the mean']))
  })

  it('dashes what falls, draws zero heavier and the mean in the model’s colour', () => {
    const svg = readSvg(seaLevelFigure({ ...data, regions: [], places: [] }, { width: 800, theme: 'live', id: 's' }).svg)
    const paths = [...svg.querySelectorAll('path')].filter(path => path.getAttribute('stroke-opacity') && path.getAttribute('fill') === 'none' && path.getAttribute('stroke') !== 'var(--soft)')
    const count = (level: (l: number) => boolean) => contours.lines.filter(line => level(line.level)).length
    expect(paths.filter(path => path.getAttribute('stroke-dasharray'))).toHaveLength(count(l => l < 0))
    expect(paths.filter(path => path.getAttribute('stroke') === 'var(--model)')).toHaveLength(count(l => l === 1.05))
    expect(paths.filter(path => path.getAttribute('stroke-width') === '1.8')).toHaveLength(count(l => l === 0 || l === 1.05))
  })

  it.each(['light', 'dark', 'print', 'live'] as const)('draws a field without contours, and without regions, in %s', (theme) => {
    expectSound(seaLevelFigure({ ...data, contours: seaLevelContours(fieldOf(() => 0), null), regions: [], places: [] }, { width: 700, theme, id: 's' }))
  })
})

describe('facts and sentence', () => {
  const region = { name: 'Northern ice dome', mass: -200, geometry: { type: 'Polygon', coordinates: [[[-44, 72], [-38, 72], [-38, 76], [-44, 76], [-44, 72]]] } as Outline }
  const facts = seaLevelFacts(well, 0.79, [region])!

  it('finds extremes, the part that falls and how far from the region', () => {
    expect(facts.lowest.position).toEqual([-42, 74])
    expect(facts.highest.value).toBeCloseTo(1.2, 2)
    // 1.2 = 14 exp(−a/9) at 22.1° from its middle; the cap has (1 − cos 22.1°)/2 of the sphere.
    const edge = 9 * Math.log(14 / 1.2)
    expect(facts.againstShare).toBeCloseTo((1 - Math.cos(edge * rad)) / 2, 2)
    // From the outline, which lies 2° from its middle to north and south.
    expect(Math.abs(facts.against[0]!.reachKm - (edge - 2) * 111.2)).toBeLessThan(120)
  })

  it('says it in one sentence', () => {
    expect(seaLevelSentence({ subject: 'For A,', facts, unit: 'mm per year', sigma: 0.05 })).toMatch(
      /^For A, the sea is calculated to rise by 0\.790\u00a0±\u00a00\.050\u00a0mm per year on average \(1σ\), to fall as far as about 2[123]00\u00a0km from Northern ice dome, and to rise most, by 1\.2\u00a0mm per year, near \d+°\u00a0[NS] \d+°\u00a0[EW]\.$/)
    const falling = seaLevelFacts({ ...well, value: well.value.map(v => -v) }, -0.79, [{ ...region, mass: 200 }])!
    expect(seaLevelSentence({ subject: 'For A,', facts: falling, unit: 'mm', sigma: null, only: region.name })).toMatch(
      /^For A, the sea is calculated to fall by 0\.790\u00a0mm on average, to rise as far as about 2[123]00\u00a0km from it, and to fall most, by 1\.2\u00a0mm, near /)
  })

  it('does not name a mean that there is not, nor a turn that there is not', () => {
    const none = seaLevelFacts(well, 1e-9, [region])!
    expect(none.mean).toBeNull()
    expect(seaLevelSentence({ subject: 'For A,', facts: none, unit: 'mm', sigma: null })).toMatch(/keep its mean level, to rise most, by 1\.2\u00a0mm, near .*, and to fall most, by 12\u00a0mm, near 74°\u00a0N 42°\u00a0W\.$/)
    const gentle = seaLevelFacts(fieldOf((_, lat) => 2 + Math.sin(lat * rad)), 2, [region])!
    expect(seaLevelSentence({ subject: 'For A,', facts: gentle, unit: 'mm', sigma: null })).toBe('For A, the sea is calculated to rise by 2.00\u00a0mm on average, and to rise most, by 3.0\u00a0mm, near 90°\u00a0N 180°.')
    const still = seaLevelFacts(fieldOf(() => 0), 0, [])!
    expect(seaLevelSentence({ subject: 'For A,', facts: still, unit: 'mm', sigma: null })).toBe('For A, the sea is calculated to stay as it is.')
  })
})
