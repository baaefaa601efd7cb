import { driftOf } from '../../../shared/figures/drift/vector.ts'
import type { Measured, Outline } from '../../../shared/types/domain.ts'
import type { BudgetRow, Comparison, ComparisonQuantity, RunRegionResult, RunResult } from '../../../shared/types/run.ts'

/** An invented run for figures, texts and tables: shaped like the engine's answer, with figures that are made up. */
export interface SampleRegion {
  name: string
  mass: number
  lod: number
  chi1: number
  chi2: number
  sigma?: number
  centroid?: [number, number]
}

export const sixRegions: SampleRegion[] = [
  { name: 'Northern ice dome', mass: -214, lod: 5.15, chi1: 1.9, chi2: -1.33, sigma: 0.07, centroid: [-41, 74] },
  { name: 'Southern ice margin', mass: -131, lod: 3.47, chi1: 0.41, chi2: 1.01, sigma: 0.13, centroid: [-105, -76] },
  { name: 'Corran glaciers', mass: -62, lod: 1.03, chi1: -0.72, chi2: -0.48, sigma: 0.16, centroid: [-145, 61] },
  { name: 'High Weir reservoirs', mass: 19, lod: 0.04, chi1: 0.1, chi2: -0.29, sigma: 0.2, centroid: [111, 31] },
  { name: 'Lower Sorrow basin', mass: -17, lod: 0.01, chi1: -0.05, chi2: -0.28, sigma: 0.3, centroid: [-98, 39] },
  { name: 'Tessel Plain aquifer', mass: -24, lod: -0.07, chi1: 0.09, chi2: 0.37, sigma: 0.15, centroid: [77, 29] },
]

const m = (value: number, sigma: number): Measured => ({ value, sigmaWhite: sigma / 2, sigma })

function row(key: string, name: string, mass: Measured | null, lod: Measured, chi1: Measured, chi2: Measured): BudgetRow {
  const covariance = { c11: chi1.sigma ** 2, c12: 0.6 * chi1.sigma * chi2.sigma, c22: chi2.sigma ** 2 }
  const drift = driftOf(chi1, chi2, covariance)
  return {
    key,
    name,
    massGtPerYear: mass,
    lodMicrosecondsPerYear: lod,
    lodMsPerCentury: m(lod.value / 10, lod.sigma / 10),
    chi1MasPerYear: chi1,
    chi2MasPerYear: chi2,
    driftCovariance: covariance,
    driftMasPerYear: drift.mas,
    driftCmPerYear: drift.cm,
    directionDegEast: drift.direction,
    barystaticMmPerYear: mass && m(-mass.value / 363, mass.sigma / 363),
    deltaJ2PerYear: m(lod.value * 0.47e-11, lod.sigma * 0.47e-11),
    shareOfModelLod: null,
    shareOfModelPole: null,
  }
}

function box([lon, lat]: [number, number], half: number): Outline {
  const top = Math.min(lat + half / 2, 89)
  const bottom = Math.max(lat - half / 2, -89)
  return { type: 'Polygon', coordinates: [[[lon - half, bottom], [lon + half, bottom], [lon + half, top], [lon - half, top], [lon - half, bottom]]] }
}

export function sampleOutlines(regions: SampleRegion[] = sixRegions): { name: string, geometry: Outline, massGtPerYear: number }[] {
  return regions.map(region => ({ name: region.name, geometry: box(region.centroid ?? [0, 0], 8), massGtPerYear: region.mass }))
}

export function sampleRun(regions: SampleRegion[] = sixRegions, fromMjd = 53005, toMjd = 60310): RunResult {
  const epochsMjd: number[] = []
  for (let t = fromMjd + 15; t < toMjd; t += 30.4375) epochsMjd.push(t)
  const years = epochsMjd.map(t => (t - (fromMjd + toMjd) / 2) / 365.25)
  const sum = (of: (region: SampleRegion) => number) => regions.reduce((total, region) => total + of(region), 0)
  const quadrature = (of: (region: SampleRegion) => number) => Math.sqrt(sum(region => of(region) ** 2))
  const relative = (region: SampleRegion) => region.sigma ?? 0.1
  const wave = (amplitude: number, i: number) => amplitude * Math.cos(years[i]! * 2 * Math.PI)
  const line = (rate: number, amplitude: number) => years.map((t, i) => rate * t + wave(amplitude, i))
  const total = row(
    'total', 'Model',
    m(sum(r => r.mass), quadrature(r => r.mass * relative(r))),
    m(sum(r => r.lod), quadrature(r => r.lod * relative(r))),
    m(sum(r => r.chi1), quadrature(r => r.chi1 * relative(r))),
    m(sum(r => r.chi2), quadrature(r => r.chi2 * relative(r))),
  )
  const results: RunRegionResult[] = regions.map((region, i) => {
    const rel = relative(region)
    const base = row(`r${i + 1}`, region.name, m(region.mass, Math.abs(region.mass) * rel), m(region.lod, Math.abs(region.lod) * rel),
      m(region.chi1, Math.abs(region.chi1) * rel), m(region.chi2, Math.abs(region.chi2) * rel))
    const unit = Math.hypot(total.chi1MasPerYear!.value, total.chi2MasPerYear!.value) ** 2
    return {
      ...base,
      kind: 'ice-sector',
      agency: 'Halcyon Survey',
      areaKm2: 1_712_400,
      centroid: region.centroid ?? [0, 0],
      scale: 1,
      perGt: { chi1Mas: 0.01, chi2Mas: 0.01, chi3: 1e-15, lodMicroseconds: -0.02, barystaticMm: -0.00276, deltaJ2: 1e-14 },
      massGt: line(region.mass, 20),
      sigmaMassGt: years.map(() => 15),
      epochsUsed: years.length,
      coverage: 1,
      trendNoise: { r1: 0.4, seasonal: true },
      shareOfModelLod: region.lod / total.lodMicrosecondsPerYear!.value,
      shareOfModelPole: (region.chi1 * total.chi1MasPerYear!.value + region.chi2 * total.chi2MasPerYear!.value) / unit,
    }
  })
  const braking = row('tides', 'Tidal braking', null, m(24, 1), m(0, 0), m(0, 0))
  return {
    schemaVersion: 1,
    engineVersion: '0.1.0',
    earthModelChecksum: '0'.repeat(64),
    settings: { ocean: 'uniform', coefficients: 'gross-2007', core: 'decoupled', fromMjd: null, toMjd: null, maxGapDays: 62, oceanAreaM2: 3.629e14 },
    span: { fromMjd, toMjd },
    epochsMjd,
    regions: results,
    total: {
      ...total,
      series: {
        massGt: line(total.massGtPerYear!.value, 60),
        lodMicroseconds: line(total.lodMicrosecondsPerYear!.value, 20),
        chi1Mas: line(total.chi1MasPerYear!.value, 4),
        chi2Mas: line(total.chi2MasPerYear!.value, 3),
        sigmaLodMicroseconds: years.map(() => 12),
        sigmaChi1Mas: years.map(() => 3),
        sigmaChi2Mas: years.map(() => 3),
      },
    },
    background: [{ ...braking, chi1MasPerYear: null, chi2MasPerYear: null, driftCovariance: null, driftMasPerYear: null, driftCmPerYear: null, directionDegEast: null, deltaJ2PerYear: null, barystaticMmPerYear: null }],
    restOfWorld: { ...emptyRow('rest', 'Rest of the world, not in this account') },
    overlaps: [],
    warnings: [],
  }
}

/** The same run with derived rates and the model's own lines, and a row of water that one region keeps on land. */
export function withPhysics(run: RunResult = sampleRun()): RunResult {
  const [first, second] = run.regions
  const half = (measured: Measured | null) => measured && { value: -measured.value / 2, sigmaWhite: measured.sigmaWhite / 2, sigma: measured.sigma / 2 }
  const kept: RunRegionResult = {
    ...second!, key: 'r1-kept', keptFrom: 'r1', name: `Kept on land: ${first!.name} to ${second!.name}`,
    massGtPerYear: half(first!.massGtPerYear), lodMicrosecondsPerYear: half(first!.lodMicrosecondsPerYear), lodMsPerCentury: half(first!.lodMsPerCentury),
  }
  return {
    ...run,
    regions: [first!, kept, ...run.regions.slice(1)],
    total: {
      ...run.total,
      barystaticMmPerYear: m(1.181, 0.074), deltaJ2PerYear: m(4.53e-11, 2.8e-12),
      derived: { deltaC21PerYear: m(-7.1e-12, 4e-13), deltaS21PerYear: m(4.2e-12, 1.1e-12), geocentreMmPerYear: { x: m(-0.08, 0.01), y: m(0.05, 0.02), z: m(-0.31, 0.03) } },
    },
    modelUncertainty: [
      { id: 'coefficients', name: 'Coefficient set', text: 'Largest difference.', chi1MasPerYear: 0.003, chi2MasPerYear: 0.004, lodMicrosecondsPerYear: 0.0512 },
      { id: 'frequency', name: 'Frequency dependence', text: 'Two per cent.', chi1MasPerYear: 0.0346, chi2MasPerYear: 0.02, lodMicrosecondsPerYear: 0 },
    ],
  }
}

export function emptyRow(key: string, name: string): BudgetRow {
  return {
    key, name, massGtPerYear: null, lodMicrosecondsPerYear: null, lodMsPerCentury: null, chi1MasPerYear: null, chi2MasPerYear: null,
    driftCovariance: null, driftMasPerYear: null, driftCmPerYear: null, directionDegEast: null, barystaticMmPerYear: null,
    deltaJ2PerYear: null, shareOfModelLod: null, shareOfModelPole: null,
  }
}

/** Numbers between −1 and 1 that look like noise and are the same every time. */
export function noise(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0
    return state / 2 ** 31 - 1
  }
}

export function sampleComparison(result: RunResult): Comparison {
  const random = noise(7)
  const quantity = (unit: 'ms' | 'mas', model: (number | null)[], scale: number, rate: Measured, seen: Measured): ComparisonQuantity => {
    let walk = 0
    const observed = model.map((value, i) => {
      walk = walk * 0.98 + random() * scale
      return (value ?? 0) * 0.6 + walk + Math.sin(i / 30) * scale * 3
    })
    return {
      unit,
      observed,
      model,
      residual: observed.map((value, i) => value - (model[i] ?? 0)),
      trends: { observed: seen, model: rate, residual: m(seen.value - rate.value, Math.hypot(seen.sigma, rate.sigma)) },
      r1: { observed: 0.93, model: 0.4, residual: 0.94 },
      rmsObserved: scale * 3,
      rmsResidual: scale * 2.7,
    }
  }
  const { series } = result.total
  const ms = (value: Measured): Measured => m(value.value / 1000, value.sigma / 1000)
  return {
    span: result.span,
    epochsMjd: result.epochsMjd,
    lod: quantity('ms', series.lodMicroseconds.map(v => v === null ? null : v / 1000), 0.08, ms(result.total.lodMicrosecondsPerYear!), m(-0.021, 0.012)),
    chi1: quantity('mas', series.chi1Mas, 8, result.total.chi1MasPerYear!, m(1.95, 0.6)),
    chi2: quantity('mas', series.chi2Mas, 8, result.total.chi2MasPerYear!, m(-1.72, 0.7)),
    noise: 'ar1',
    notRemoved: ['zonal tides', 'atmosphere', 'ocean circulation'],
    warnings: [],
  }
}
