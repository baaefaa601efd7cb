import { coefficientSetIds, coreChoices, oceanModes, type PhysicsSettings } from '../types/domain.ts'
import { InputError, type Issue } from '../types/issue.ts'
import { contourOf, type Contour } from './contour.ts'
import type { EarthModel } from './earthModel.ts'
import type { EvaluateRegion, EvaluateRequest, SharedError } from './evaluateTypes.ts'
import { countPositions } from '../geo/checkShape.ts'
import { limits, requireOutline } from '../geo/outline.ts'
import { mjdFromDecimalYear, mjdFromIsoDate } from './time/epochs.ts'

/** A region of a request, checked: one mass, or one mass per epoch. */
export interface CheckedRegion {
  id: string
  contour: Contour
  massGt: Float64Array
  /** Per epoch or single; null: none was given. */
  sigmaGt: Float64Array | null
  shared: SharedError[]
}

export interface CheckedRequest {
  settings: PhysicsSettings
  regions: CheckedRegion[]
  /** MJD of the epochs; null with single masses. */
  mjd: Float64Array | null
}

/** Fewest epochs that a trend is fitted to. */
const FEWEST_EPOCHS = 3

/** Settings with their defaults; the fingerprint is the default as soon as the model holds its fields. Adds issues for what is unknown. */
function settingsOf(request: EvaluateRequest, model: EarthModel, issues: Issue[]): PhysicsSettings {
  const given = (request.settings ?? {}) as Record<string, unknown>
  const choose = <T extends string>(key: string, choices: readonly T[], fallback: T): T => {
    const value = given[key]
    if (value === undefined) return fallback
    if (choices.includes(value as T)) return value as T
    issues.push({ path: `settings/${key}`, code: 'unknown-setting', value: String(value).slice(0, 60), message: `${key} must be one of ${choices.join(', ')}.` })
    return fallback
  }
  for (const key of Object.keys(given)) {
    if (!['ocean', 'coefficients', 'core'].includes(key)) issues.push({ path: `settings/${key}`, code: 'unknown-setting', message: `There is no setting "${key}"; known are ocean, coefficients and core.` })
  }
  return {
    ocean: choose('ocean', oceanModes, model.defaultOcean),
    coefficients: choose('coefficients', coefficientSetIds, 'gross-2007'),
    core: choose('core', coreChoices, 'decoupled')
  }
}

/** Checks the numbers of a request and measures its outlines. Throws InputError with one issue for each fault. */
export function checkRequest(request: EvaluateRequest, model: EarthModel): CheckedRequest {
  const issues: Issue[] = []
  const settings = settingsOf(request, model, issues)
  const list = Array.isArray(request.regions) ? request.regions : []
  requireSize(list)
  if (list.length === 0) issues.push({ path: 'regions', code: 'no-regions', message: 'At least one region is needed.' })
  const withSeries = list.length > 0 && list[0]!.series != null
  const mjd = withSeries ? epochsOf(list[0]!, issues) : null
  const ids = new Set<string>()
  const regions: CheckedRegion[] = []
  list.forEach((region, i) => {
    const path = `regions/${i}`
    if (ids.has(region.id)) issues.push({ path: `${path}/id`, code: 'duplicate-id', value: region.id, message: `The id "${region.id}" is used by another region.` })
    ids.add(region.id)
    const masses = withSeries ? seriesOf(region, list[0]!, path, issues) : singleOf(region, path, issues)
    const shared = sharedOf(region, path, issues)
    const contour = measured(region, path, issues)
    if (masses && contour) regions.push({ id: region.id, contour, ...masses, shared })
  })
  if (issues.length > 0) throw new InputError(`The request has ${issues.length === 1 ? 'a fault' : `${issues.length} faults`}.`, issues)
  return { settings, regions, mjd }
}

function measured(region: EvaluateRegion, path: string, issues: Issue[]): Contour | null {
  const place = `${path}/geometry`
  let outline
  try {
    outline = requireOutline(region.geometry, place)
  }
  catch (error) {
    if (!(error instanceof InputError)) throw error
    issues.push(...error.issues)
    return null
  }
  try {
    return contourOf(outline)
  }
  catch (error) {
    if (!(error instanceof InputError)) throw error
    for (const issue of error.issues) issues.push({ ...issue, path: `${place}/${issue.path ?? ''}` })
    return null
  }
}

/** One request may not hold the server for seconds: the vertices of all its outlines together are limited. */
function requireSize(regions: readonly EvaluateRegion[]): void {
  let vertices = 0
  for (const region of regions) vertices += countPositions((region.geometry as { coordinates?: unknown } | null)?.coordinates, limits.vertices)
  if (vertices <= limits.vertices) return
  const message = `The outlines have more than ${limits.vertices} vertices together. Simplify them or send fewer at once.`
  throw new InputError(message, [{ path: 'regions', code: 'too-many-vertices', message }], 413)
}

function epochsOf(region: EvaluateRegion, issues: Issue[]): Float64Array {
  const path = 'regions/0/series/epochs'
  const epochs = region.series!.epochs
  const mjd = new Float64Array(epochs.length)
  epochs.forEach((epoch, i) => {
    try {
      mjd[i] = typeof epoch === 'number' ? mjdFromDecimalYear(epoch) : mjdFromIsoDate(epoch)
    }
    catch {
      mjd[i] = NaN
      issues.push({ path: `${path}/${i}`, code: 'bad-epoch', value: String(epoch).slice(0, 40), message: 'An epoch must be a date like 2002-04-17 or a decimal year.' })
      return
    }
    if (i > 0 && mjd[i]! === mjd[i - 1]!) issues.push({ path: `${path}/${i}`, code: 'duplicate-epoch', value: String(epoch), message: `The epoch ${epoch} appears twice.` })
    else if (i > 0 && mjd[i]! < mjd[i - 1]!) issues.push({ path: `${path}/${i}`, code: 'epochs-not-rising', value: String(epoch), message: `Epochs must rise; ${epoch} follows ${epochs[i - 1]}.` })
  })
  if (epochs.length < FEWEST_EPOCHS) issues.push({ path, code: 'too-few-epochs', message: `A series needs at least ${FEWEST_EPOCHS} epochs; this one has ${epochs.length}.` })
  return mjd
}

function seriesOf(region: EvaluateRegion, first: EvaluateRegion, path: string, issues: Issue[]): { massGt: Float64Array, sigmaGt: Float64Array | null } | null {
  const { series } = region
  if (!series) {
    issues.push({ path: `${path}/series`, code: 'mixed-masses', message: 'All regions of a request carry a series, or all carry one mass; this one has no series.' })
    return null
  }
  if (region.massGt !== undefined) issues.push({ path: `${path}/massGt`, code: 'mixed-masses', message: 'A region carries either massGt or series, not both.' })
  const n = series.epochs.length
  const expected = first.series!.epochs
  if (region !== first && (n !== expected.length || series.epochs.some((epoch, i) => epoch !== expected[i]))) {
    const at = n === expected.length ? series.epochs.findIndex((epoch, i) => epoch !== expected[i]) : -1
    issues.push({ path: at < 0 ? `${path}/series/epochs` : `${path}/series/epochs/${at}`, code: 'unequal-epochs', message: at < 0 ? `All regions need the same epochs; this one has ${n}, the first region ${expected.length}.` : `All regions need the same epochs; here ${series.epochs[at]}, in the first region ${expected[at]}.` })
  }
  const massGt = numbers(series.massGt, n, `${path}/series/massGt`, false, issues)
  const sigmaGt = series.sigmaGt == null ? null : numbers(series.sigmaGt, n, `${path}/series/sigmaGt`, true, issues)
  if (sigmaGt && sigmaGt.some(s => s > 0)) {
    sigmaGt.forEach((s, i) => {
      if (s === 0) issues.push({ path: `${path}/series/sigmaGt/${i}`, code: 'sigma-zero', value: '0', message: 'A one-sigma of zero among others would give this epoch infinite weight.' })
    })
  }
  return { massGt, sigmaGt }
}

function singleOf(region: EvaluateRegion, path: string, issues: Issue[]): { massGt: Float64Array, sigmaGt: Float64Array | null } | null {
  if (region.series) {
    issues.push({ path: `${path}/series`, code: 'mixed-masses', message: 'All regions of a request carry a series, or all carry one mass.' })
    return null
  }
  if (typeof region.massGt !== 'number' || !Number.isFinite(region.massGt)) {
    issues.push({ path: `${path}/massGt`, code: 'not-a-number', value: String(region.massGt).slice(0, 40), message: 'massGt must be a finite number of gigatonnes.' })
    return null
  }
  if (region.sigmaGt === undefined) return { massGt: Float64Array.of(region.massGt), sigmaGt: null }
  if (!checkSigma(region.sigmaGt, `${path}/sigmaGt`, issues)) return null
  return { massGt: Float64Array.of(region.massGt), sigmaGt: Float64Array.of(region.sigmaGt) }
}

function sharedOf(region: EvaluateRegion, path: string, issues: Issue[]): SharedError[] {
  const seen = new Set<string>()
  for (const [k, { source, sigmaGt }] of (region.shared ?? []).entries()) {
    checkSigma(sigmaGt, `${path}/shared/${k}/sigmaGt`, issues)
    if (seen.has(source)) issues.push({ path: `${path}/shared/${k}/source`, code: 'duplicate-source', value: source, message: `The source "${source}" appears twice in this region.` })
    seen.add(source)
  }
  return region.shared ?? []
}

function numbers(list: readonly number[], n: number, path: string, sigma: boolean, issues: Issue[]): Float64Array {
  if (!Array.isArray(list) || list.length !== n) {
    issues.push({ path, code: 'unequal-lengths', message: `There must be one number for each of the ${n} epochs, got ${Array.isArray(list) ? list.length : 'none'}.` })
    return new Float64Array(n)
  }
  list.forEach((value, i) => {
    if (sigma) checkSigma(value, `${path}/${i}`, issues)
    else if (typeof value !== 'number' || !Number.isFinite(value)) issues.push({ path: `${path}/${i}`, code: 'not-a-number', value: String(value).slice(0, 40), message: 'A mass must be a finite number of gigatonnes.' })
  })
  return Float64Array.from(list)
}

function checkSigma(value: unknown, path: string, issues: Issue[]): boolean {
  if (typeof value === 'number' && Number.isFinite(value) && value >= 0) return true
  const negative = typeof value === 'number' && value < 0
  issues.push({ path, code: negative ? 'sigma-negative' : 'not-a-number', value: String(value).slice(0, 40), message: negative ? 'A one-sigma cannot be negative.' : 'A one-sigma must be a finite number of gigatonnes.' })
  return false
}
