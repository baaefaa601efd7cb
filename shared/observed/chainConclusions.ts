import { medianStep } from '../earth/time/monthlyMeans.ts'
import { COARSE_POLE_DAYS } from '../earth/time/observedExcitation.ts'
import { FILTER_VALID_STEPS } from '../earth/time/polarMotion.ts'
import type { ObservedSeries, RunWarning } from '../types/run.ts'
import { chainQuantities } from './chainTypes.ts'
import type { Chain, ChainQuantity, ChainResult, ChainStep, Track } from './chainTypes.ts'
import { trendOf } from './steps.ts'

type Conclusions = Pick<ChainResult, 'trends' | 'noTrend' | 'background' | 'excitationValidFromDays' | 'chartNote' | 'notRemoved' | 'warnings'>

/** Largest bias of a trend by the 18.6-year tide, for warnings. */
const NODAL_BIAS = 'the 18.6-year tide biases its trend by up to 3.7 ms per century over 10 years and 1.2 over 20'

/** What may be said of the series after a chain: trends that may be quoted, rows of the budget, what is still in. */
export function chainConclusions(series: ObservedSeries, chain: Chain, tracks: Partial<Record<ChainQuantity, Track>>, fluidWarnings: readonly RunWarning[]): Conclusions {
  const active = chain.steps.filter(step => step.on)
  const find = <K extends ChainStep['kind']>(kind: K): Extract<ChainStep, { kind: K }> | undefined =>
    active.find((step): step is Extract<ChainStep, { kind: K }> => step.kind === kind)
  const gravity = series.from === 'gravity'
  const tides = find('zonal-tides')
  const detrended = find('detrend') !== undefined
  const madeHere = find('excitation') !== undefined && !series.chi1Mas && tracks.chi1 !== undefined
  const step = medianStep(series.mjd)
  const background = active.flatMap(s => s.kind === 'background' ? s.rows : [])
  const warnings: RunWarning[] = [...fluidWarnings]
  const warn = (code: string, message: string): void => {
    warnings.push({ code, message, regions: [] })
  }
  const noTrend: Conclusions['noTrend'] = []
  const trends: Conclusions['trends'] = {}
  for (const quantity of chainQuantities) {
    const track = tracks[quantity]
    if (!track || quantity === 'ut1') continue
    const reason = quantity === 'lod' && tides?.set === 'under-35-days' && !gravity
      ? 'Only the tides under 35 days are removed: the 18.6-year tide would be in a trend of the length of day, so none is quoted.'
      : detrended && quantity !== 'x' && quantity !== 'y' ? 'The trend was taken away.' : null
    if (reason) noTrend.push({ quantity, reason })
    trends[quantity] = reason ? null : trendOf(track.mjd, track.value)
  }
  if (tracks.lod && !gravity && tides?.set === 'under-35-days') warn('no-trend', noTrend.find(({ quantity }) => quantity === 'lod')!.reason)
  if (tracks.lod && !gravity && !tides) warn('tides-in', `Zonal tides are still in the length of day: ${NODAL_BIAS}.`)
  if (chain.includePredictions && series.predicted.some(p => p === 1)) warn('predictions-in', 'Predicted rows are included.')
  if (madeHere && step > COARSE_POLE_DAYS) warn('coarse-pole', `The pole is given every ${Math.round(step)} days: excitation is damped at periods under ${Math.round(FILTER_VALID_STEPS * step)} days.`)
  if (find('smoothing')) warn('smoothed', 'Errors of trends are those of the smoothed series; the lag-one correlation holds the smoothing.')
  const cores = new Set(background.filter(row => row.lodMsPerCentury !== null).map(row => row.core ?? 'unstated'))
  if (cores.size > 1) warn('core-mixed', 'The background rates assume different couplings of the core, 21 % apart in the length of day: compare before adding.')
  return {
    trends,
    noTrend,
    background,
    excitationValidFromDays: madeHere ? FILTER_VALID_STEPS * step : null,
    chartNote: chartNoteOf(active, gravity),
    notRemoved: notRemovedOf(series, active, tracks, gravity),
    warnings
  }
}

function chartNoteOf(active: readonly ChainStep[], gravity: boolean): string {
  const has = (kind: ChainStep['kind']): boolean => active.some(step => step.kind === kind)
  const smoothing = active.find(step => step.kind === 'smoothing')
  return [
    has('detrend') ? 'trend removed' : 'trend left in',
    has('seasons') ? 'seasons removed' : 'seasons left in',
    gravity ? null : has('zonal-tides') ? active.some(step => step.kind === 'zonal-tides' && step.set === 'all') ? 'zonal tides removed' : 'only tides under 35 days removed' : 'zonal tides left in',
    smoothing?.kind === 'smoothing' ? `smoothed over ${smoothing.smoothing.widthDays} d` : null,
    has('monthly') ? 'monthly means' : null
  ].filter(part => part !== null).join(', ')
}

function notRemovedOf(series: ObservedSeries, active: readonly ChainStep[], tracks: Partial<Record<ChainQuantity, Track>>, gravity: boolean): string[] {
  const fluids = active.filter(step => step.kind === 'angular-momentum')
  const tides = active.find(step => step.kind === 'zonal-tides')
  const pole = tracks.chi1 !== undefined || tracks.x !== undefined
  return [
    ...(tracks.lod && !gravity && !tides ? ['zonal tides in the length of day, among them the 18.6-year one of about 0.15 ms'] : []),
    ...(tracks.lod && !gravity && tides?.kind === 'zonal-tides' && tides.set === 'under-35-days' ? ['zonal tides of more than 35 days, among them the 18.6-year one of about 0.15 ms'] : []),
    ...(tracks.lod && !gravity ? ['coupling of core and mantle, a few ms over decades'] : []),
    ...(fluids.length === 0 ? [gravity ? 'mass of atmosphere and ocean, unless the series was made without them' : 'angular momentum of atmosphere and ocean, most of the seasonal and interannual change'] : []),
    ...(fluids.some(step => step.kind === 'angular-momentum' && !step.trend) ? ['trends of atmosphere and ocean'] : []),
    'glacial isostatic adjustment and other background rates, which stand in the budget',
    ...(pole && !gravity ? ['long-period ocean tides in polar motion'] : [])
  ]
}
