import { overlapsOf } from '../../geo/overlap.ts'
import type { OutlineOverlap } from '../../geo/overlap.ts'
import { InputError } from '../../types/issue.ts'
import type { BudgetRow, OverlapChoice, RegionOverlap, RunInput, RunRegionInput, RunRegionResult, RunResult, RunTotalSeries } from '../../types/run.ts'
import { movedPart, withPattern } from '../cellPattern.ts'
import { contourOf } from '../contour.ts'
import type { Contour } from '../contour.ts'
import type { EarthModel } from '../earthModel.ts'
import { responseOf } from '../response.ts'
import type { ResponsePerGt } from '../response.ts'
import { budgetRow, emptyRow, enteredRow, functional, sharesOf } from './budget.ts'
import type { EffectPerGt, MassRates } from './budget.ts'
import { covarianceOf } from './covariance.ts'
import type { CalendarMonth } from './epochs.ts'
import { JULIAN_YEAR_DAYS } from './epochs.ts'
import { monthlyAnomalies, monthlyWeights } from './monthly.ts'
import type { MonthlyAnomalies } from './monthly.ts'
import { choiceOf, countedOnce } from './countedOnce.ts'
import type { TakenOff } from './countedOnce.ts'
import { keptOnLand, netEffect, ownEffect } from './keptOnLand.ts'
import type { KeptOnLand } from './keptOnLand.ts'
import { derivedRates, modelUncertaintyRates } from './runDerived.ts'
import { runWarnings } from './runWarnings.ts'
import { LEAST_EPOCHS, checkSeries, spanOf } from './span.ts'
import type { Span } from './span.ts'
import { fitTrend } from './trend.ts'
import type { TrendFit } from './trend.ts'

export interface FittedRegion {
  /** As it was sent, with the grounded part already in its factor. */
  region: RunRegionInput
  /** The factor as it was sent. */
  scale: number
  /** With the pattern of the mass in it, where its series has one. */
  contour: Contour
  response: ResponsePerGt
  /** Response of an even spread; null where the mass is spread evenly anyway. */
  even: ResponsePerGt | null
  /** The part that is kept on land; null where all of it reaches the sea. */
  kept: KeptOnLand | null
  /** Mass of this series that is taken off other regions, which hold it as well. */
  taken: TakenOff[]
  fit: TrendFit | null
  monthly: MonthlyAnomalies
  epochsUsed: number
}

/**
 * A run: responses of the outlines × mass series, monthly sums, trends on the native epochs, budget. Depends on nothing but
 * its arguments, so that the same input gives the same digits.
 *
 * Trends per Julian year by `fitTrend`. Errors: sigmaWhite from the residuals; sigma inflated for lag-one correlation plus the
 * systematic rates, of which the same source adds linearly over regions, with the sign of their factor and their response.
 *
 * @throws InputError for series that cannot be used, an empty span, or fewer than three epochs of a region inside it;
 *   ModeNotAvailableError for a fingerprint mode that the model has no fields for
 */
export function computeRun(input: RunInput, model: EarthModel): RunResult {
  checkSeries(input.regions)
  const active = input.regions.filter(region => region.scale !== 0)
  const choices = input.overlapChoices ?? []
  const common = overlapsOf(active.map(region => ({ id: region.key, geometry: region.geometry })))
  const { span, months } = spanOf(input.regions, input.settings)
  checkEpochs(input.regions, span)

  const fitted = countedOnce(keptOnLand(input.regions.map(region => fitRegion(region, input.settings, model, span, months)), input.settings, model), common, choices)
  const overlaps = common.map(overlap => overlapResult(overlap, fitted, choices))
  const rates = ratesOf(fitted)
  const total = budgetRow('total', 'Sum of the regions', rates, fitted.map(netEffect))
  const regions = fitted.flatMap((f) => {
    const row = budgetRow(f.region.key, f.region.name, ratesOf([f]), [ownEffect(f)])
    const own = { ...regionResult(f, row, months), derived: derivedRates([{ ...f, kept: null, taken: [] }], ratesOf([f]), input.settings.ocean, model), ...sharesOf(row, total) }
    return [own, ...(f.kept ? [keptResult(f, f.kept, total, months)] : []), ...f.taken.map(taken => takenResult(f, taken, total, months))]
  })
  return {
    schemaVersion: 1,
    engineVersion: model.engineVersion,
    earthModelChecksum: model.checksum,
    settings: { ...input.settings, oceanAreaM2: model.ocean.areaM2 },
    span,
    epochsMjd: months.map(month => month.middleMjd),
    regions,
    total: { ...total, derived: derivedRates(fitted, rates, input.settings.ocean, model), series: totalSeries(fitted.filter(f => f.region.scale !== 0), months) },
    modelUncertainty: modelUncertaintyRates(fitted, rates, input.settings, model),
    background: input.background.map(enteredRow),
    restOfWorld: input.restOfWorld ? enteredRow(input.restOfWorld) : emptyRow('rest-of-world', 'Rest of the world, not in this account'),
    overlaps,
    warnings: runWarnings(input, overlaps, fitted.map(f => ({ region: f.region, contour: f.contour, fit: f.fit, coverage: f.monthly.coverage })), model)
  }
}

function checkEpochs(regions: readonly RunRegionInput[], span: Span): void {
  const issues = regions.flatMap((region, i) => {
    const inside = region.series.mjd.filter(t => t >= span.fromMjd && t <= span.toMjd).length
    return region.scale === 0 || inside >= LEAST_EPOCHS
      ? []
      : [{ path: `regions/${i}/series`, code: 'too-few-epochs', message: `${region.name}: a trend needs at least ${LEAST_EPOCHS} epochs inside the span, got ${inside}.` }]
  })
  if (issues.length > 0) throw new InputError('Some series have too few epochs inside the span', issues)
}

function fitRegion(sent: RunRegionInput, settings: RunInput['settings'], model: EarthModel, span: Span, months: readonly CalendarMonth[]): FittedRegion {
  const region = { ...sent, scale: sent.scale * (sent.groundedFraction ?? 1) }
  const { series } = region
  const inside = series.mjd.map((t, i) => t >= span.fromMjd && t <= span.toMjd ? i : -1).filter(i => i >= 0)
  const mjd = inside.map(i => series.mjd[i]!)
  const value = inside.map(i => series.massGt[i]!)
  const given = series.sigmaGt ? inside.map(i => series.sigmaGt![i]!) : null
  const fit = mjd.length >= LEAST_EPOCHS ? fitTrend({ mjd, value, sigma: given }) : null
  const sigma = given ?? value.map(() => fit?.residualSigma ?? 0)
  const outline = contourOf(region.geometry)
  const contour = withPattern(outline, region.pattern)
  return {
    region,
    scale: sent.scale,
    contour,
    response: responseOf(contour, model, settings),
    even: region.pattern ? responseOf(outline, model, settings) : null,
    kept: null,
    taken: [],
    fit,
    monthly: monthlyAnomalies(monthlyWeights(mjd, months, settings.maxGapDays), months, value, sigma),
    epochsUsed: mjd.length
  }
}

/** Mass rates of regions with their factors, Gt per year, and both covariances; a region that is switched off counts nothing. */
function ratesOf(fitted: readonly FittedRegion[]): MassRates {
  const n = fitted.length
  const scales = fitted.map(f => f.region.scale)
  const factors = fitted.flatMap(({ region }, i) => region.series.sharedRates.map(({ source, sigmaGtPerYear }) => {
    const loading = new Float64Array(n)
    loading[i] = region.scale * sigmaGtPerYear
    return { source, loading }
  }))
  return {
    value: fitted.map((f, i) => scales[i]! * (f.fit?.value ?? 0) + 0),
    quoted: covarianceOf(fitted.map((f, i) => scales[i]! * (f.fit?.sigma ?? 0)), factors),
    white: covarianceOf(fitted.map((f, i) => scales[i]! * (f.fit?.sigmaWhite ?? 0)))
  }
}

function regionResult(f: FittedRegion, row: BudgetRow, months: readonly CalendarMonth[]): RunRegionResult {
  const { region, contour, monthly } = f
  const sources = sourcesOf(region)
  return {
    ...row,
    kind: region.kind,
    agency: region.agency,
    areaKm2: contour.areaM2 / 1e6,
    centroid: contour.centroid,
    scale: f.scale,
    perGt: { ...f.response },
    ...(f.even ? { evenSpread: { basis: region.pattern!.basis, cells: region.pattern!.excess.length, movedPart: movedPart(region.pattern!), perGt: { ...f.even } } } : {}),
    massGt: monthly.value.map(value => value === null ? null : region.scale * value + 0),
    sigmaMassGt: monthly.variance.map((variance, j) => {
      if (variance === null) return null
      const years = (months[j]!.middleMjd - monthly.meanMjd) / JULIAN_YEAR_DAYS
      return Math.abs(region.scale) * Math.sqrt(variance + sources.reduce((sum, s) => sum + (s.rate * years) ** 2, 0))
    }),
    epochsUsed: f.epochsUsed,
    coverage: monthly.coverage,
    trendNoise: { r1: f.fit?.r1 ?? 0, seasonal: f.fit?.seasonal ?? false }
  }
}

/** The row of what a region's water does where it is kept on land: of opposite sign, and fully correlated with the region's own. */
function keptResult(f: FittedRegion, { effect, target }: KeptOnLand, total: BudgetRow, months: readonly CalendarMonth[]): RunRegionResult {
  const name = target ? `Kept on land: ${f.region.name} to ${target.name}` : `Kept on land elsewhere: from ${f.region.name}`
  return elsewhereResult(f, `${f.region.key}-kept`, name, effect, target?.contour ?? null, total, months)
}

/** The row of what is taken off a region because this one's series counts it: fully correlated with this one's own row. */
function takenResult(f: FittedRegion, { effect, from }: TakenOff, total: BudgetRow, months: readonly CalendarMonth[]): RunRegionResult {
  const name = `Counted once: ${f.region.name}, taken off ${from.region.name}`
  return { ...elsewhereResult(f, `${f.region.key}-off-${from.region.key}`, name, effect, from.contour, total, months), takenFrom: from.region.key }
}

function elsewhereResult(f: FittedRegion, key: string, name: string, effect: EffectPerGt, place: Contour | null, total: BudgetRow, months: readonly CalendarMonth[]): RunRegionResult {
  const row = budgetRow(key, name, ratesOf([f]), [effect])
  const { evenSpread: _, ...own } = regionResult(f, row, months)
  const { massGt: factor, ...perGt } = effect
  return {
    ...own, ...sharesOf(row, total), keptFrom: f.region.key, perGt,
    areaKm2: place ? place.areaM2 / 1e6 : 0, centroid: place ? place.centroid : [0, 0],
    massGt: own.massGt.map(mass => mass === null ? null : factor * mass + 0),
    sigmaMassGt: own.sigmaMassGt.map(sigma => sigma === null ? null : Math.abs(factor) * sigma)
  }
}

/** An overlap with what each series holds there and what was decided. */
function overlapResult(overlap: OutlineOverlap, fitted: readonly FittedRegion[], choices: readonly OverlapChoice[]): RegionOverlap {
  const onGround = (key: string, share: number) => functional(ratesOf(fitted.filter(f => f.region.key === key)), [share])
  const settled = choiceOf(choices, overlap)
  return {
    ...overlap,
    onGroundGtPerYear: { a: onGround(overlap.a, overlap.shareOfA), b: onGround(overlap.b, overlap.shareOfB) },
    ...(settled ? { settled: { choice: settled.choice, from: settled.from, reason: settled.reason } } : {})
  }
}

/** Systematic rates of a series, each source once, Gt per year. */
function sourcesOf(region: RunRegionInput): { source: string, rate: number }[] {
  const rates = new Map<string, number>()
  for (const { source, sigmaGtPerYear } of region.series.sharedRates) rates.set(source, (rates.get(source) ?? 0) + sigmaGtPerYear)
  return [...rates].map(([source, rate]) => ({ source, rate }))
}

/** Monthly sums, where every region has a value, with errors: independent per region, named sources added with their signs. */
function totalSeries(active: readonly FittedRegion[], months: readonly CalendarMonth[]): RunTotalSeries {
  const sources = active.map(f => sourcesOf(f.region))
  const names = [...new Set(sources.flat().map(s => s.source))]
  const sourceIndex = sources.map(list => list.map(({ source, rate }) => ({ at: names.indexOf(source), rate })))
  const effects = active.map(netEffect)
  const sum = (pick: (effect: EffectPerGt) => number): { value: (number | null)[], sigma: (number | null)[] } => {
    const value: (number | null)[] = []
    const sigma: (number | null)[] = []
    months.forEach((month, j) => {
      let total = 0
      let variance = 0
      const systematic = new Float64Array(names.length)
      for (let i = 0; i < active.length; i++) {
        const { region, monthly } = active[i]!
        const mass = monthly.value[j] ?? null
        if (mass === null) {
          value.push(null)
          sigma.push(null)
          return
        }
        const weight = region.scale * pick(effects[i]!)
        total += weight * mass
        variance += weight ** 2 * monthly.variance[j]!
        const years = (month.middleMjd - monthly.meanMjd) / JULIAN_YEAR_DAYS
        for (const { at, rate } of sourceIndex[i]!) systematic[at] = systematic[at]! + weight * rate * years
      }
      for (const s of systematic) variance += s * s
      value.push(total)
      sigma.push(Math.sqrt(variance))
    })
    return { value, sigma }
  }
  const mass = sum(r => r.massGt)
  const lod = sum(r => r.lodMicroseconds)
  const chi1 = sum(r => r.chi1Mas)
  const chi2 = sum(r => r.chi2Mas)
  return {
    massGt: mass.value,
    lodMicroseconds: lod.value,
    chi1Mas: chi1.value,
    chi2Mas: chi2.value,
    sigmaLodMicroseconds: lod.sigma,
    sigmaChi1Mas: chi1.sigma,
    sigmaChi2Mas: chi2.sigma
  }
}
