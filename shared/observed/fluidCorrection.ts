import { coefficientSets } from '../earth/coefficientSets.ts'
import { AXIAL_ROTATIONAL_FACTOR, DAY_SECONDS, MAS, ROTATIONAL_FACTOR } from '../earth/constants.ts'
import { JULIAN_YEAR_DAYS } from '../earth/time/epochs.ts'
import { present } from '../earth/time/monthlyMeans.ts'
import { fitTrend } from '../earth/time/trend.ts'
import type { Issue } from '../types/issue.ts'
import type { RunWarning } from '../types/run.ts'
import type { AngularMomentumSeries } from './angularMomentumTypes.ts'
import type { ChainStep, FluidCorrection } from './chainTypes.ts'

type FluidStep = Extract<ChainStep, { kind: 'angular-momentum' }>

/** Steps of a series that count as a gap when they are longer than this many usual ones. */
const LONGEST_GAP_STEPS = 2.5

/**
 * A correction in the unit of one observed quantity: χ₁, χ₂ in mas, ΔLOD in ms, mass and motion as asked. Values of a rigid Earth get
 * the factors of Gross (2007): mass a_xy and a_z, motion 1.608 and 0.997.
 */
export function correctionValues({ series, fields }: FluidCorrection, step: Pick<FluidStep, 'mass' | 'motion'>, quantity: 'lod' | 'chi1' | 'chi2'): Float64Array {
  const name = quantity === 'lod' ? 'chi3' : quantity
  const unit = quantity === 'lod' ? DAY_SECONDS * 1000 : 1 / MAS
  const rigid = fields.coefficients === 'rigid'
  const gross = coefficientSets['gross-2007']
  const massFactor = unit * (rigid ? quantity === 'lod' ? gross.aZ : gross.aXY : 1)
  const motionFactor = unit * (rigid ? quantity === 'lod' ? AXIAL_ROTATIONAL_FACTOR : ROTATIONAL_FACTOR : 1)
  const values = new Float64Array(series.mjd.length)
  const [mass, motion] = [series.mass[name], series.motion[name]]
  for (let i = 0; i < values.length; i++) values[i] = (step.mass ? massFactor * mass[i]! : 0) + (step.motion ? motionFactor * motion[i]! : 0)
  return values
}

/**
 * A series on other epochs: its mean over `widthDays` about each of them where its own steps are finer, else between its neighbours by a
 * straight line. NaN outside the series and across its gaps: nothing is carried on.
 */
export function onEpochs(series: Pick<AngularMomentumSeries, 'mjd' | 'stepDays'>, value: Float64Array, epochs: ArrayLike<number>, widthDays: number): Float64Array {
  const whole = value.every(v => !Number.isNaN(v))
  const { epochs: t, values } = whole ? { epochs: series.mjd, values: value } : present(series.mjd, value)
  const longest = LONGEST_GAP_STEPS * series.stepDays
  const averaged = series.stepDays < 0.75 * widthDays
  const half = averaged ? widthDays / 2 : 0
  // Integral of the straight lines between the values, up to each of them; across a gap it is not defined.
  const integral = new Float64Array(t.length)
  const stretch = new Int32Array(t.length)
  for (let i = 1; i < t.length; i++) {
    const dt = t[i]! - t[i - 1]!
    integral[i] = integral[i - 1]! + dt * (values[i]! + values[i - 1]!) / 2
    stretch[i] = stretch[i - 1]! + (dt > longest ? 1 : 0)
  }
  const at = (epoch: number): { line: number, sum: number, stretch: number } | null => {
    if (t.length === 0 || epoch < t[0]! || epoch > t.at(-1)!) return null
    let low = 0
    let high = t.length - 1
    while (high - low > 1) {
      const middle = (low + high) >> 1
      if (t[middle]! <= epoch) low = middle
      else high = middle
    }
    if (t[high] === epoch) return { line: values[high]!, sum: integral[high]!, stretch: stretch[high]! }
    if (stretch[low] !== stretch[high] && t[low] !== epoch) return null
    const share = high === low ? 0 : (epoch - t[low]!) / (t[high]! - t[low]!)
    const line = values[low]! + share * (values[high]! - values[low]!)
    return { line, sum: integral[low]! + (epoch - t[low]!) * (values[low]! + line) / 2, stretch: stretch[low]! }
  }
  return Float64Array.from(epochs, (epoch) => {
    if (!averaged) return at(epoch)?.line ?? Number.NaN
    const from = at(epoch - half)
    const to = at(epoch + half)
    return from && to && from.stretch === to.stretch ? (to.sum - from.sum) / widthDays : Number.NaN
  })
}

/** What is subtracted: the correction about its mean, without its linear trend unless asked. Also the trend, per Julian year. */
export function withoutMean(mjd: ArrayLike<number>, value: Float64Array, keepTrendOut: boolean): { removed: Float64Array, trendPerYear: number | null } {
  const { epochs, values } = present(mjd, value)
  if (epochs.length === 0) return { removed: value, trendPerYear: null }
  const mean = values.reduce((sum, v) => sum + v, 0) / values.length
  if (epochs.length < 3) return { removed: value.map(v => v - mean), trendPerYear: null }
  const { value: trend } = fitTrend({ mjd: epochs, value: values })
  const middle = epochs.reduce((sum, t) => sum + t, 0) / epochs.length
  return {
    removed: value.map((v, i) => v - mean - (keepTrendOut ? trend * (mjd[i]! - middle) / JULIAN_YEAR_DAYS : 0)),
    trendPerYear: trend
  }
}

/** Refusals: where a subtraction would take water away that the account lets move itself, or the same fluid twice. */
export function fluidRefusals(steps: readonly { path: string, step: FluidStep, correction: FluidCorrection }[], gravityWithoutFluids: boolean): Issue[] {
  const issues: Issue[] = []
  const refuse = (path: string, message: string): void => {
    issues.push({ path, code: 'counted-twice', message })
  }
  const seen = new Map<string, string>()
  for (const { path, step, correction: { name, fields } } of steps) {
    if (fields.component === 'sea-level') refuse(path, `“${name}” is sea level made by water from land, which the account’s own ocean makes: the same water would count twice.`)
    if (fields.component === 'land-water') refuse(path, `“${name}” is water on land, which the regions hold: the same water would count twice.`)
    if (fields.component === 'ocean' && step.mass && fields.barystatic === 'yes') refuse(path, `The mass term of “${name}” holds water from land, which the account’s own ocean makes: the same water would count twice. Its motion term may be subtracted.`)
    if (gravityWithoutFluids && step.mass) refuse(path, `The gravity coefficients were made without atmosphere and ocean: the mass term of “${name}” would be taken off twice.`)
    const earlier = seen.get(fields.component)
    if (earlier) refuse(path, `“${name}” and “${earlier}” are the same fluid (${fields.component}), subtracted twice.`)
    seen.set(fields.component, name)
  }
  return issues
}

/** Warnings about what was subtracted, by the answers stored with the series. */
export function fluidWarnings(steps: readonly { step: FluidStep, correction: FluidCorrection }[]): RunWarning[] {
  const list: RunWarning[] = []
  const warn = (code: string, message: string): void => {
    list.push({ code, message, regions: [] })
  }
  for (const { step, correction: { name, fields } } of steps) {
    if (fields.component === 'ocean' && step.mass && fields.barystatic === 'unknown') warn('barystatic-unknown', `Whether “${name}” holds water from land is not known; if it does, that water counts twice.`)
    if (fields.component === 'ocean' && step.trend) warn('ocean-trend', `The trend of “${name}” is subtracted. Ocean models that conserve volume drift, and their trend is then no water.`)
    else if (step.trend) warn('fluid-trend', `The trend of “${name}” is subtracted: it is no longer in the observed series.`)
    if (fields.coefficients === 'unknown') warn('coefficients-unknown', `Which coefficients are in “${name}” is not known: the pole may be off by 2 %, the day by 5 %.`)
    if (fields.coefficients === 'barnes-1983' || fields.coefficients === 'eubanks-1993') warn('coefficients-other', `“${name}” was made with the coefficients of ${coefficientSets[fields.coefficients].name}; it is subtracted as it is.`)
  }
  const of = (component: string): (typeof steps)[number] | undefined => steps.find(({ correction }) => correction.fields.component === component)
  const air = of('atmosphere')
  const sea = of('ocean')
  if (air?.step.mass && !sea && air.correction.fields.invertedBarometer !== 'yes') {
    warn('no-inverted-barometer', `“${air.correction.name}” is subtracted without an ocean and without an inverted barometer: pressure over the sea is not answered.`)
  }
  if (air && sea) {
    const [a, o] = [air.correction, sea.correction]
    if (a.fields.invertedBarometer === 'unknown' || o.fields.invertedBarometer === 'unknown') warn('inverted-barometer-unknown', 'Whether atmosphere and ocean both take the sea as an inverted barometer is not known; if not, its answer to pressure counts twice or not at all.')
    else if (a.fields.invertedBarometer !== o.fields.invertedBarometer) warn('inverted-barometer', `“${a.name}” and “${o.name}” differ on the inverted barometer: the sea’s answer to pressure counts ${a.fields.invertedBarometer === 'yes' ? 'twice' : 'not at all'}.`)
    if (o.fields.pairedWith === null) warn('pairing-unknown', `Which atmosphere drove “${o.name}” is not stated.`)
    else if (o.fields.pairedWith.trim().toLowerCase() !== a.fields.model.trim().toLowerCase()) warn('pairing', `“${o.name}” was driven by ${o.fields.pairedWith}, not by ${a.fields.model}.`)
  }
  return list
}
