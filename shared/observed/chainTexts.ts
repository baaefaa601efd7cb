import { present } from '../earth/time/monthlyMeans.ts'
import { formatNumber, formatSignificant } from '../format/numbers.ts'
import type { ChainInputs } from './chain.ts'
import type { ChainQuantity, ChainStep, ChainStepKind, StepPanel, Track } from './chainTypes.ts'
import { seasonsOf } from './steps.ts'

export const stepTitles: Readonly<Record<ChainStepKind, string>> = {
  'zonal-tides': 'Zonal tides', 'excitation': 'From the pole to excitation', 'angular-momentum': 'Atmosphere and ocean', 'background': 'Background rates',
  'seasons': 'Seasons', 'smoothing': 'Smoothing', 'monthly': 'Monthly means', 'detrend': 'Trend'
}

export const quantityTexts: Readonly<Record<ChainQuantity, { symbol: string, name: string }>> = {
  lod: { symbol: 'ΔLOD', name: 'length of day' }, ut1: { symbol: 'UT1 − TAI', name: 'UT1' }, x: { symbol: 'x', name: 'pole towards Greenwich' },
  y: { symbol: 'y', name: 'pole towards 90° W' }, chi1: { symbol: 'χ₁', name: 'excitation towards Greenwich' }, chi2: { symbol: 'χ₂', name: 'excitation towards 90° E' }
}

/** Sizes below this, ms or mas, are rounding. */
const LEAST_SHOWN = 1e-6

/** Source of what a step does. */
export function stepSources(step: ChainStep, inputs: ChainInputs): string {
  switch (step.kind) {
    case 'zonal-tides': return 'IERS Conventions (2010), Petit & Luzum (eds.), IERS Technical Note 36, Table 8.1'
    case 'excitation': return 'Wilson (1985), Geophys. J. R. astr. Soc. 80, 551; exact for excitation that is constant over a step'
    case 'angular-momentum': return inputs.corrections?.[step.correction]?.source ?? step.correction
    case 'background': return step.rows.map(row => `${row.name}: ${row.source}`).join('; ')
    case 'seasons': return 'Least squares of constant, trend, annual and semiannual terms'
    case 'smoothing': return 'Running mean, kernel cut at the ends and at gaps'
    case 'monthly': return 'Means over calendar months of at least half of their days'
    case 'detrend': return 'Least squares of constant, trend, annual and semiannual terms'
  }
}

/** What a step did, with its size, in a sentence or two. */
export function panelSentence(step: ChainStep, panels: readonly StepPanel[], worked: boolean, inputs: ChainInputs, gravity: boolean): string {
  if (!step.on) return `${stepTitles[step.kind]}: switched off, nothing is taken away.`
  if (!worked) return nothingToDo(step, gravity)
  const size = (track: Track | null | undefined): string => {
    const value = track ? rms(track) : 0
    return value < LEAST_SHOWN ? '0' : formatSignificant(value, 2)
  }
  const of = (quantity: ChainQuantity): StepPanel | undefined => panels.find(panel => panel.quantity === quantity)
  const each = (fn: (panel: StepPanel) => string): string => panels.map(panel => `${quantityTexts[panel.quantity].symbol} ${fn(panel)} ${panel.unit}`).join(', ')
  switch (step.kind) {
    case 'zonal-tides': {
      const [set, rest] = step.set === 'all' ? ['All 62 zonal tides', ''] : ['The 41 zonal tides under 35 days', ' The 18.6-year tide is still in, so no trend of the length of day is quoted.']
      return `${set} of Table 8.1 are taken off${of('lod') ? ` the length of day (${size(of('lod')!.removed)} ms rms)` : ''}${of('ut1') ? `${of('lod') ? ' and' : ''} UT1 (${size(of('ut1')!.removed)} ms rms)` : ''}.${rest}`
    }
    case 'excitation':
      return `The pole becomes geodetic excitation with a Chandler period of ${formatNumber(step.periodDays, 1)} d and Q = ${formatNumber(step.q)}, at the midpoints between its epochs; what is taken away is the wobble itself (${each(panel => size(panel.removed))} rms).`
    case 'angular-momentum': {
      const { name, fields } = inputs.corrections![step.correction]!
      const motion = step.motion && !gravity
      const terms = step.mass && motion ? 'Mass and motion terms' : step.mass ? 'The mass term' : 'The motion term'
      const open = panels.some(panel => missing(panel.after) > missing(panel.before)) ? ' Where it has no value, none is left.' : ''
      return `${terms} of “${name}” (${fields.component === 'atmosphere' ? 'atmosphere' : 'ocean'}) ${step.mass && motion ? 'are' : 'is'} subtracted about ${step.mass && motion ? 'their' : 'its'} mean: ${each(panel => size(panel.removed))} rms. ${step.trend ? 'The trend is subtracted too.' : 'The trend is not subtracted: it stays in the observed series.'}${open}`
    }
    case 'background':
      return `${step.rows.map(row => row.name).join(', ')}: kept as ${step.rows.length === 1 ? 'a row' : 'rows'} of the budget with ${step.rows.length === 1 ? 'its' : 'their'} uncertainty; nothing is taken away here.`
    case 'seasons':
      return `Annual and semiannual terms are fitted and taken away: annual amplitudes ${each(panel => formatSignificant(annualAmplitude(panel.before), 2))}.`
    case 'smoothing':
      return `A ${step.smoothing.kind === 'gaussian' ? 'Gaussian' : 'boxcar'} of ${formatNumber(step.smoothing.widthDays, step.smoothing.widthDays % 1 === 0 ? 0 : 1)} d (${step.smoothing.kind === 'gaussian' ? 'full width at half maximum' : 'full width'}) is run over the series; ${each(panel => size(panel.removed))} rms of short variation is taken away.`
    case 'monthly':
      return `Means over calendar months: ${formatNumber(panels[0]?.after.mjd.length ?? 0)} months, each with its number of independent days.`
    case 'detrend':
      return 'A straight line is fitted with the seasons and taken away: charts show no trend, and none is quoted.'
  }
}

function nothingToDo(step: ChainStep, gravity: boolean): string {
  switch (step.kind) {
    case 'zonal-tides': return gravity ? 'Gravity coefficients hold no tide of rotation: nothing is taken away.' : 'There is no length of day to take tides off.'
    case 'excitation': return 'The series holds no pole to be turned into excitation, or holds excitation already.'
    case 'background': return 'No background rate is entered.'
    case 'seasons': return 'The record is too short for seasons: nothing is taken away.'
    case 'angular-momentum': return 'Neither term is chosen, or there is nothing that it could be subtracted from.'
    default: return 'There is nothing that the step could work on.'
  }
}

/** Root mean square about the mean of what is there. */
function rms({ mjd, value }: Track): number {
  const { values } = present(mjd, value)
  if (values.length === 0) return 0
  const mean = values.reduce((sum, v) => sum + v, 0) / values.length
  return Math.sqrt(values.reduce((sum, v) => sum + (v - mean) ** 2, 0) / values.length)
}

function missing({ value }: Track): number {
  return value.reduce((count, v) => count + (Number.isNaN(v) ? 1 : 0), 0)
}

function annualAmplitude({ mjd, value }: Track): number {
  const fit = seasonsOf(mjd, value)?.fit
  return fit ? Math.hypot(fit.coefficients[2]!, fit.coefficients[3]!) : 0
}
