import { describe, expect, it } from 'vitest'
import { loadDetailedEarthModel } from '../../../shared/earth/detailedEarthModel.ts'
import { evaluate } from '../../../shared/earth/evaluate.ts'
import { POLE_MM_PER_MAS } from '../../../shared/earth/constants.ts'
import { ModeNotAvailableError } from '../../../shared/earth/earthModel.ts'
import type { EvaluateRegion, EvaluateRequest } from '../../../shared/earth/evaluateTypes.ts'
import { InputError } from '../../../shared/types/issue.ts'
import type { Outline } from '../../../shared/types/domain.ts'
import { loadCases } from '../../reference/earth/loadCases.ts'

const model = loadDetailedEarthModel()
const box = (w: number, s: number, e: number, n: number): Outline => ({ type: 'Polygon', coordinates: [[[w, s], [e, s], [e, n], [w, n], [w, s]]] })
const inland = box(-45, 68, -35, 76)
const plain = box(72, 22, 80, 30)
const uniform = { ocean: 'uniform' } as const
const ask = (regions: EvaluateRegion[], settings: EvaluateRequest['settings'] = uniform) => evaluate({ regions, settings }, model)
const issuesOf = (request: unknown): string[] => {
  try {
    evaluate(request as EvaluateRequest, model)
  }
  catch (error) {
    if (error instanceof InputError) return error.issues.map(issue => `${issue.path} ${issue.code}`)
    throw error
  }
  return []
}

describe('single masses', () => {
  it('answers every quantity, and sums in total without what has no sum', () => {
    const { settings, regions, total, warnings } = ask([{ id: 'ice', geometry: inland, massGt: -100 }, { id: 'water', geometry: plain, massGt: 40 }])
    expect(settings).toEqual({ ocean: 'uniform', coefficients: 'gross-2007', core: 'decoupled', engineVersion: model.engineVersion, oceanAreaM2: model.ocean.areaM2 })
    expect(warnings).toEqual([])
    for (const key of ['massGt', 'chi1Mas', 'chi2Mas', 'chi3', 'lodMicroseconds', 'barystaticMm', 'deltaJ2'] as const) {
      expect(total[key]).toBeCloseTo((regions[0]![key] as number) + (regions[1]![key] as number), 14)
    }
    expect(Object.keys(total)).not.toContain('id')
    expect(Object.keys(total)).not.toContain('areaKm2')
    expect(Object.keys(total)).not.toContain('centroid')
    expect(Object.keys(total)).not.toContain('trend')
    expect(total.poleShiftMm).toBeCloseTo(Math.hypot(total.chi1Mas as number, total.chi2Mas as number) * POLE_MM_PER_MAS, 12)
    // Loss of polar ice: a longer day, a higher sea, a flatter Earth, the pole towards the ice.
    expect(regions[0]!.lodMicroseconds).toBeGreaterThan(0)
    expect(regions[0]!.barystaticMm).toBeCloseTo(100 / 362.8776, 4)
    expect(regions[0]!.deltaJ2).toBeGreaterThan(0)
    expect(regions[0]!.poleDirectionDegEast).toBeCloseTo(-38, -1)
  })

  it('is linear in the mass over eighteen orders of magnitude', () => {
    const one = ask([{ id: 'a', geometry: plain, massGt: 1 }]).total
    for (const factor of [1e9, 1e-9, -3]) {
      const scaled = ask([{ id: 'a', geometry: plain, massGt: factor }]).total
      expect((scaled.chi1Mas as number) / factor).toBeCloseTo(one.chi1Mas as number, 14)
      expect((scaled.lodMicroseconds as number) / factor).toBeCloseTo(one.lodMicroseconds as number, 14)
    }
  })

  it('gives no direction for no shift', () => {
    const { regions, total } = ask([{ id: 'a', geometry: plain, massGt: 5 }, { id: 'b', geometry: box(100, 22, 101, 23), massGt: 0 }])
    expect(regions[1]!.poleDirectionDegEast).toBeNull()
    expect(regions[1]!.poleShiftMm).toBe(0)
    expect(total.poleDirectionDegEast).not.toBeNull()
  })

  it('accepts every outline of the reference cases', () => {
    for (const { loads } of loadCases()) {
      expect(() => ask(loads.map((load, i) => ({ id: String(i), geometry: load.geometry, massGt: load.mass_Gt })))).not.toThrow()
    }
  })

  it('takes coefficient set and core as asked', () => {
    const of = (settings: EvaluateRequest['settings']) => ask([{ id: 'a', geometry: plain, massGt: 10 }], settings).total
    const gross = of(uniform)
    const barnes = of({ ...uniform, coefficients: 'barnes-1983' })
    const coupled = of({ ...uniform, core: 'coupled' })
    expect((barnes.chi1Mas as number) / (gross.chi1Mas as number)).toBeCloseTo(1 / 2.344 * 2.63095 / 1.099872, 9)
    expect(coupled.chi1Mas).toBe(gross.chi1Mas)
    expect((gross.lodMicroseconds as number) / (coupled.lodMicroseconds as number)).toBeCloseTo(0.74775 / 7.1236 / 0.695 * 8.0365, 9)
  })
})

describe('errors', () => {
  const region = (id: string, geometry: Outline, sigmaGt?: number, shared?: [string, number][]): EvaluateRegion =>
    ({ id, geometry, massGt: -50, ...(sigmaGt === undefined ? {} : { sigmaGt }), ...(shared ? { shared: shared.map(([source, s]) => ({ source, sigmaGt: s })) } : {}) })

  it('sums the squares inside a region', () => {
    const { sigma, chi1Mas, lodMicroseconds, poleShiftMm, barystaticMm } = ask([region('a', plain, 3, [['gia', 4], ['c20', 12]])]).regions[0]!
    expect(sigma.massGt).toBeCloseTo(13, 12)
    expect(sigma.chi1Mas).toBeCloseTo(Math.abs(chi1Mas as number) / 50 * 13, 12)
    expect(sigma.lodMicroseconds).toBeCloseTo(Math.abs(lodMicroseconds as number) / 50 * 13, 12)
    expect(sigma.poleShiftMm).toBeCloseTo((poleShiftMm as number) / 50 * 13, 10)
    expect(sigma.barystaticMm).toBeCloseTo(Math.abs(barystaticMm as number) / 50 * 13, 12)
  })

  it('adds a shared source linearly over regions, independent ones in squares', () => {
    const same = ask([region('a', plain, 3, [['gia', 4]]), region('b', inland, 5, [['gia', 8]])])
    const apart = ask([region('a', plain, 3, [['gia', 4]]), region('b', inland, 5, [['other', 8]])])
    expect(same.total.sigma.massGt).toBeCloseTo(Math.sqrt(9 + 25 + 144), 12)
    expect(apart.total.sigma.massGt).toBeCloseTo(Math.sqrt(9 + 25 + 16 + 64), 12)
    // χ₁ of the two has the opposite sign per gigatonne where they lie in opposite meridians: then a shared error cancels.
    const [a, b] = same.regions.map(r => (r.chi1Mas as number) / -50) as [number, number]
    expect(same.total.sigma.chi1Mas).toBeCloseTo(Math.sqrt((3 * a) ** 2 + (5 * b) ** 2 + (4 * a + 8 * b) ** 2), 12)
  })

  it('takes the part of the error along the shift', () => {
    const { total, regions } = ask([region('a', plain, 3), region('b', inland, 5)])
    const u = [total.chi1Mas as number, total.chi2Mas as number].map(c => c / Math.hypot(total.chi1Mas as number, total.chi2Mas as number))
    const along = regions.map(r => (u[0]! * (r.chi1Mas as number) + u[1]! * (r.chi2Mas as number)) / -50)
    expect(total.sigma.poleShiftMm).toBeCloseTo(Math.hypot(3 * along[0]!, 5 * along[1]!) * POLE_MM_PER_MAS, 10)
  })

  it('are zero where none was given', () => {
    expect(ask([region('a', plain)]).total.sigma).toEqual({ massGt: 0, chi1Mas: 0, chi2Mas: 0, lodMicroseconds: 0, poleShiftMm: 0, barystaticMm: 0 })
  })
})

describe('series', () => {
  const epochs = Array.from({ length: 48 }, (_, i) => `${2005 + Math.floor(i / 12)}-${String(i % 12 + 1).padStart(2, '0')}-16`)
  const years = epochs.map(e => Date.parse(e) / 86_400_000 / 365.25)
  const line = (rate: number) => years.map(y => rate * (y - years[0]!))
  const seasons = years.map(y => 7 * Math.cos(2 * Math.PI * y + 0.3) - 2 * Math.sin(4 * Math.PI * y))
  const noise = years.map((_, i) => Math.sin(i * i * 1.7))

  it('gives arrays, one per epoch, and the rate it was made with', () => {
    const massGt = line(-120).map((m, i) => m + seasons[i]!)
    const { regions, total, epochs: answered } = ask([{ id: 'a', geometry: inland, series: { epochs, massGt } }])
    expect(answered).toEqual(epochs)
    expect(regions[0]!.massGt).toEqual(massGt)
    expect((regions[0]!.poleDirectionDegEast as (number | null)[])[0]).toBeTypeOf('number')
    expect((regions[0]!.sigma.massGt as number[]).length).toBe(48)
    expect(regions[0]!.trend!.massGt.value).toBeCloseTo(-120, 9)
    const perGt = ask([{ id: 'a', geometry: inland, massGt: 1 }]).total
    expect(total.trend!.lodMicroseconds.value).toBeCloseTo(-120 * (perGt.lodMicroseconds as number), 9)
    expect(total.trend!.poleShiftMm.value).toBeCloseTo(120 * (perGt.poleShiftMm as number), 8)
    expect(total.trend!.poleDirectionDegEast!.value).toBeCloseTo(ask([{ id: 'a', geometry: inland, massGt: -1 }]).total.poleDirectionDegEast as number, 9)
  })

  it('adds shared rates to the quoted error of the trend only', () => {
    const series = { epochs, massGt: line(-20).map((m, i) => m + noise[i]!) }
    const bare = ask([{ id: 'a', geometry: plain, series }]).regions[0]!
    const shared = ask([{ id: 'a', geometry: plain, series, shared: [{ source: 'gia', sigmaGt: 3 }] }]).regions[0]!
    expect(shared.sigma.massGt).toEqual(bare.sigma.massGt)
    expect(shared.trend!.massGt.sigmaWhite).toBe(bare.trend!.massGt.sigmaWhite)
    expect(shared.trend!.massGt.sigma).toBeCloseTo(Math.hypot(bare.trend!.massGt.sigma, 3), 12)
  })

  it('adds shared rates of regions linearly and knows residuals that are common to regions', () => {
    const a = { epochs, massGt: line(-20).map((m, i) => m + noise[i]!) }
    const both = ask([{ id: 'a', geometry: plain, series: a, shared: [{ source: 'gia', sigmaGt: 3 }] }, { id: 'b', geometry: inland, series: a, shared: [{ source: 'gia', sigmaGt: 4 }] }])
    const one = both.regions[0]!.trend!
    expect(both.total.trend!.massGt.value).toBeCloseTo(2 * one.massGt.value, 12)
    // Twice the same residuals: twice the error, not √2 of it.
    expect(both.total.trend!.massGt.sigmaWhite).toBeCloseTo(2 * one.massGt.sigmaWhite, 10)
    const quoted = Math.sqrt(one.massGt.sigma ** 2 - 9)
    expect(both.total.trend!.massGt.sigma).toBeCloseTo(Math.hypot(2 * quoted, 7), 9)
    expect(both.total.trend!.poleDirectionDegEast!.sigma).toBeGreaterThan(0)
  })

  it('reads decimal years as parts of the calendar year', () => {
    const decimal = [2004, 2004.5, 2005, 2005.25, 2006]
    const answer = ask([{ id: 'a', geometry: plain, series: { epochs: decimal, massGt: [0, 183, 366, 366 + 91.25, 731] } }])
    // One gigatonne a day, since 2004 has 366 days: 365.25 in a Julian year.
    expect(answer.total.trend!.massGt.value).toBeCloseTo(365.25, 9)
  })

  it('says that a record under two years holds no seasons', () => {
    const short = epochs.slice(0, 12)
    expect(ask([{ id: 'a', geometry: plain, series: { epochs: short, massGt: short.map((_, i) => i) } }]).warnings.map(w => [w.code, w.regions])).toEqual([['short-series', ['a']]])
  })
})

describe('warnings', () => {
  it('names regions that overlap', () => {
    const { warnings } = ask([{ id: 'basin', geometry: plain, massGt: 1 }, { id: 'lake', geometry: box(75, 25, 76, 26), massGt: 1 }])
    expect(warnings.map(w => [w.code, w.regions])).toEqual([['overlap', ['basin', 'lake']]])
  })
  it('says that no ocean is no prediction', () => {
    expect(ask([{ id: 'a', geometry: plain, massGt: 1 }], { ocean: 'none' }).warnings.map(w => w.code)).toEqual(['mass-not-conserved'])
  })
  it('sees the sea inside an outline', () => {
    const { warnings } = ask([{ id: 'a', geometry: box(-40, 20, -30, 30), massGt: 1 }])
    expect(warnings.map(w => w.code)).toEqual(['ocean-inside'])
    expect(warnings[0]!.message).toContain('100 %')
  })
})

describe('faults', () => {
  const good = { id: 'a', geometry: plain, massGt: 1 }
  const series = { epochs: ['2001-01-01', '2002-01-01', '2003-01-01', '2004-01-01'], massGt: [1, 2, 3, 4] }
  const region = (more: object) => ({ regions: [{ id: 'a', geometry: plain, ...more }], settings: uniform })
  it.each([
    [{ regions: [], settings: uniform }, ['regions no-regions']],
    [{ regions: [good, { ...good }], settings: uniform }, ['regions/1/id duplicate-id']],
    [{ regions: [good], settings: { ocean: 'deep' } }, ['settings/ocean unknown-setting']],
    [{ regions: [good], settings: { ...uniform, mantle: 'soft' } }, ['settings/mantle unknown-setting']],
    [region({ massGt: Infinity }), ['regions/0/massGt not-a-number']],
    [region({}), ['regions/0/massGt not-a-number']],
    [region({ massGt: 1, sigmaGt: -2 }), ['regions/0/sigmaGt sigma-negative']],
    [region({ massGt: 1, shared: [{ source: 'gia', sigmaGt: -2 }] }), ['regions/0/shared/0/sigmaGt sigma-negative']],
    [region({ massGt: 1, shared: [{ source: 'gia', sigmaGt: 2 }, { source: 'gia', sigmaGt: 1 }] }), ['regions/0/shared/1/source duplicate-source']],
    [region({ massGt: 1, series }), ['regions/0/massGt mixed-masses']],
    [{ regions: [{ id: 'a', geometry: plain, series }, { ...good, id: 'b' }], settings: uniform }, ['regions/1/series mixed-masses']],
    [region({ series: { ...series, massGt: [1, 2, 3] } }), ['regions/0/series/massGt unequal-lengths']],
    [region({ series: { ...series, massGt: [1, 2, NaN, 4] } }), ['regions/0/series/massGt/2 not-a-number']],
    [region({ series: { ...series, sigmaGt: [1, 2, -3, 4] } }), ['regions/0/series/sigmaGt/2 sigma-negative']],
    [region({ series: { ...series, sigmaGt: [1, 0, 3, 4] } }), ['regions/0/series/sigmaGt/1 sigma-zero']],
    [region({ series: { epochs: ['2001-01-01', '2001-13-01', '2003-01-01'], massGt: [1, 2, 3] } }), ['regions/0/series/epochs/1 bad-epoch']],
    [region({ series: { epochs: ['2001-01-01', '2001-01-01', '2003-01-01'], massGt: [1, 2, 3] } }), ['regions/0/series/epochs/1 duplicate-epoch']],
    [region({ series: { epochs: ['2001-01-01', '2003-01-01', '2002-01-01'], massGt: [1, 2, 3] } }), ['regions/0/series/epochs/2 epochs-not-rising']],
    [region({ series: { epochs: ['2001-01-01', '2003-01-01'], massGt: [1, 2] } }), ['regions/0/series/epochs too-few-epochs']],
    [{ regions: [{ id: 'a', geometry: plain, series }, { id: 'b', geometry: plain, series: { ...series, epochs: [...series.epochs.slice(0, 3), '2005-01-01'] } }], settings: uniform }, ['regions/1/series/epochs/3 unequal-epochs']]
  ])('%#', (request, expected) => {
    expect(issuesOf(request)).toEqual(expected)
  })

  it('names the place in an outline', () => {
    expect(issuesOf(region({ massGt: 1, geometry: box(0, 0, 10, 95) }))[0]).toMatch(/^regions\/0\/geometry\/coordinates\/0\/2 /)
    expect(issuesOf(region({ massGt: 1, geometry: { type: 'Polygon', coordinates: [[[0, 0], [10, 10], [10, 0], [0, 10], [0, 0]]] } }))[0]).toMatch(/^regions\/0\/geometry/)
    expect(issuesOf(region({ massGt: 1, geometry: { type: 'Point', coordinates: [0, 0] } }))[0]).toMatch(/^regions\/0\/geometry/)
  })

  it('refuses more than 200 000 vertices as too large', () => {
    const ring = Array.from({ length: 200_001 }, (_, i) => [30 * Math.cos(i / 200_001 * 2 * Math.PI), 30 * Math.sin(i / 200_001 * 2 * Math.PI)])
    try {
      evaluate({ regions: [{ id: 'a', geometry: { type: 'Polygon', coordinates: [[...ring, ring[0]]] } as Outline, massGt: 1 }], settings: uniform }, model)
      expect.unreachable()
    }
    catch (error) {
      expect((error as InputError).status).toBe(413)
    }
  })

  it('names a mode whose fields the model lacks', () => {
    expect(() => ask([good as EvaluateRegion], { ocean: 'fingerprint' })).toThrow(ModeNotAvailableError)
  })
})
