import type { BackgroundRow, RunInput, RunResult } from '../types/run.ts'
import { rateOf } from './assemble.ts'
import { closureOf } from './closure.ts'
import type { Closure } from './closure.ts'
import { Causes, combine, correlationOfLoaded, covarianceOfLoaded, exactly, sigmaOf } from './loaded.ts'
import type { Loaded } from './loaded.ts'
import { netRegions } from './netRegions.ts'
import { rotationQuantities } from './types.ts'
import type { RotationQuantity } from './types.ts'

/** Observed trends over the run's span, µs and mas per Julian year, under the noise that is quoted; null where not observed. */
export type ObservedRates = Partial<Record<RotationQuantity, { value: number, sigma: number } | null>>

export interface Rate { value: number, sigma: number }

/** Part of a row along the observed drift and across it (to the east of it positive), mas per year and as shares of its length. */
export interface DriftShares { along: Rate, across: Rate, shareAlong: Rate, shareAcross: Rate }

export interface AttributionRow {
  key: string
  name: string
  kind: 'region' | 'background' | 'rest' | 'model' | 'observed' | 'residual'
  massGtPerYear: Rate | null
  /** µs per year: side by side with the observed one, never as a share of it. */
  lodMicrosecondsPerYear: Rate | null
  chi1MasPerYear: Rate | null
  chi2MasPerYear: Rate | null
  driftCovariance: { c11: number, c12: number, c22: number } | null
  /** Shares of the MODEL's sum: ratio for the day, projection for the pole. */
  shareOfModel: { lod: number | null, pole: number | null }
  /** Null without an observed drift that stands out of its error. */
  ofObservedDrift: DriftShares | null
}

/** One vector of the drifts drawn head to tail, with the covariance of the sum up to its head. */
export interface DriftLink { key: string, name: string, from: [chi1: number, chi2: number], to: [chi1: number, chi2: number], covariance: { c11: number, c12: number, c22: number } }

export interface AttributionBudget {
  rows: AttributionRow[]
  model: AttributionRow
  observed: AttributionRow
  residual: AttributionRow
  /** Correlations between the rows, by quantity; null where a row says nothing. */
  correlation: Record<RotationQuantity, (number | null)[][]>
  driftChain: DriftLink[]
  closure: Closure
  sentences: string[]
}

/** A row's three figures with their causes; what `residual.ts` works on. */
export interface LoadedRow { key: string, name: string, kind: AttributionRow['kind'], figures: Partial<Record<RotationQuantity, Loaded>>, massGtPerYear: Rate | null }
export interface LoadedBudget { rows: LoadedRow[], model: LoadedRow, observed: LoadedRow, residual: LoadedRow, causes: number, ownCause: Map<string, number> }

/**
 * Rows of the budget with their errors by cause: each region's own, named sources that regions and background share, and the noise of
 * the observed trends. Background and rest of the world are rows of the model; what is not entered says nothing.
 */
export function loadedBudget(input: RunInput, result: RunResult, observed: ObservedRates): LoadedBudget {
  const causes = new Causes()
  const active = netRegions(result).filter(region => region.scale !== 0)
  const entered = [...input.background.map(row => ({ row, kind: 'background' as const })), ...(input.restOfWorld ? [{ row: input.restOfWorld, kind: 'rest' as const }] : [])]
  const series = new Map(input.regions.map(region => [region.key, region.series]))
  const named = new Set<string>()
  const ownCause = new Map<string, number>()
  for (const { key } of active) {
    ownCause.set(key, causes.index(`region ${key}`))
    for (const { source } of series.get(key)!.sharedRates) {
      named.add(source)
      causes.index(`source ${source}`)
    }
  }
  const causeOf = (row: BackgroundRow, quantity: RotationQuantity): number =>
    causes.index(named.has(row.source) ? `source ${row.source}` : named.has(row.name) ? `source ${row.name}` : `row ${row.key} ${quantity}`)
  for (const { row } of entered) for (const quantity of rotationQuantities) if (rateOf(row, quantity)) causeOf(row, quantity)
  for (const quantity of rotationQuantities) causes.index(`observed ${quantity}`)

  const n = causes.size
  const regions = active.map((region): LoadedRow => {
    const perGt: Record<RotationQuantity, number> = { lod: region.perGt.lodMicroseconds, chi1: region.perGt.chi1Mas, chi2: region.perGt.chi2Mas }
    const mass = exactly(region.massGtPerYear?.value ?? 0, n)
    let shared = 0
    for (const { source, sigmaGtPerYear } of series.get(region.key)!.sharedRates) {
      const at = causes.index(`source ${source}`)
      mass.loadings[at] = mass.loadings[at]! + region.scale * sigmaGtPerYear
    }
    for (const loading of mass.loadings) shared += loading * loading
    mass.loadings[ownCause.get(region.key)!] = Math.sqrt(Math.max(0, (region.massGtPerYear?.sigma ?? 0) ** 2 - shared))
    return {
      key: region.key, name: region.name, kind: 'region', massGtPerYear: region.massGtPerYear && { value: region.massGtPerYear.value, sigma: region.massGtPerYear.sigma },
      figures: Object.fromEntries(rotationQuantities.map(quantity => [quantity, combine([[perGt[quantity], mass]], n)]))
    }
  })
  const others = entered.map(({ row, kind }): LoadedRow => ({
    key: row.key, name: row.name, kind, massGtPerYear: null,
    figures: Object.fromEntries(rotationQuantities.flatMap((quantity) => {
      const rate = rateOf(row, quantity)
      if (!rate) return []
      const figure = exactly(rate.value, n)
      figure.loadings[causeOf(row, quantity)] = rate.sigma
      return [[quantity, figure]]
    }))
  }))
  const rows = [...regions, ...others]
  const sum = (quantity: RotationQuantity): Loaded => combine(rows.flatMap(({ figures }) => figures[quantity] ? [[1, figures[quantity]] as const] : []), n)
  const model = { key: 'model', name: 'Model', kind: 'model' as const, massGtPerYear: null, figures: Object.fromEntries(rotationQuantities.map(quantity => [quantity, sum(quantity)])) as Record<RotationQuantity, Loaded> }
  const seen: LoadedRow = {
    key: 'observed', name: 'Observed', kind: 'observed', massGtPerYear: null,
    figures: Object.fromEntries(rotationQuantities.flatMap((quantity) => {
      const rate = observed[quantity]
      if (!rate) return []
      const figure = exactly(rate.value, n)
      figure.loadings[causes.index(`observed ${quantity}`)] = rate.sigma
      return [[quantity, figure]]
    }))
  }
  const residual: LoadedRow = {
    key: 'residual', name: 'Residual', kind: 'residual', massGtPerYear: null,
    figures: Object.fromEntries(rotationQuantities.flatMap(quantity => seen.figures[quantity] ? [[quantity, combine([[1, seen.figures[quantity]], [-1, model.figures[quantity]]], n)]] : []))
  }
  return { rows, model, observed: seen, residual, causes: n, ownCause }
}

/** The budget as it is read: figures with σ and correlations, shares, drifts head to tail, closure. */
export function attributionBudget(input: RunInput, result: RunResult, observed: ObservedRates): AttributionBudget {
  const loaded = loadedBudget(input, result, observed)
  const drift = driftOfRow(loaded.observed)
  const stands = drift !== null && Math.hypot(drift.value[0], drift.value[1]) >= 2 * Math.sqrt(largest(drift.covariance))
  const read = (row: LoadedRow): AttributionRow => readRow(row, loaded, stands)
  const rows = loaded.rows.map(read)
  const residual = read(loaded.residual)
  return {
    rows,
    model: read(loaded.model),
    observed: read(loaded.observed),
    residual,
    correlation: Object.fromEntries(rotationQuantities.map(quantity => [quantity, loaded.rows.map(a => loaded.rows.map((b) => {
      const [x, y] = [a.figures[quantity], b.figures[quantity]]
      return x && y ? correlationOfLoaded(x, y) : null
    }))])) as AttributionBudget['correlation'],
    driftChain: chainOf(loaded),
    closure: closureOfTrends(loaded, input),
    sentences: [
      ...(stands ? [] : ['The observed drift does not stand out of its error, or is not observed: no share of it is given.']),
      ...(loaded.observed.figures.lod ? ['For the length of day the rates stand side by side, in µs per year. No share of the observed trend is given: the Earth’s core moves the day by a few ms over decades.'] : [])
    ]
  }
}

function readRow(row: LoadedRow, { model, observed }: LoadedBudget, stands: boolean): AttributionRow {
  const rate = (figure: Loaded | undefined): Rate | null => figure ? { value: figure.value, sigma: sigmaOf(figure) } : null
  const drift = driftOfRow(row)
  const total = driftOfRow(model)
  const square = total ? total.value[0] ** 2 + total.value[1] ** 2 : 0
  const ofModel = row.kind === 'region' || row.kind === 'background' || row.kind === 'rest'
  const day = model.figures.lod?.value ?? 0
  return {
    key: row.key, name: row.name, kind: row.kind, massGtPerYear: row.massGtPerYear,
    lodMicrosecondsPerYear: rate(row.figures.lod), chi1MasPerYear: rate(row.figures.chi1), chi2MasPerYear: rate(row.figures.chi2),
    driftCovariance: drift?.covariance ?? null,
    shareOfModel: {
      lod: ofModel && row.figures.lod && day !== 0 ? row.figures.lod.value / day : null,
      pole: ofModel && drift && square > 0 ? (drift.value[0] * total!.value[0] + drift.value[1] * total!.value[1]) / square : null
    },
    ofObservedDrift: stands && row.kind !== 'observed' && row.figures.chi1 && row.figures.chi2
      ? driftShares(row.figures.chi1, row.figures.chi2, observed.figures.chi1!, observed.figures.chi2!)
      : null
  }
}

/** Shares along u and across it, with linear errors of both vectors: s = v·u/|u|², w = u×v/|u|². */
function driftShares(v1: Loaded, v2: Loaded, u1: Loaded, u2: Loaded): DriftShares {
  const n = v1.loadings.length
  const length = Math.hypot(u1.value, u2.value)
  const [x, y] = [u1.value / length, u2.value / length]
  const along = combine([[x, v1], [y, v2]], n)
  const across = combine([[-y, v1], [x, v2]], n)
  const [s, w] = [along.value / length, across.value / length]
  const rate = (figure: Loaded, value = figure.value): Rate => ({ value, sigma: sigmaOf(figure) })
  // Derivatives by u: ∂s = (v − 2 s u)·∂u/|u|², ∂w = (v⊥ − 2 w u)·∂u/|u|² with v⊥ = (v₂, −v₁).
  const shareAlong = combine([[x / length, v1], [y / length, v2], [(v1.value / length - 2 * s * x) / length, u1], [(v2.value / length - 2 * s * y) / length, u2]], n)
  const shareAcross = combine([[-y / length, v1], [x / length, v2], [(v2.value / length - 2 * w * x) / length, u1], [(-v1.value / length - 2 * w * y) / length, u2]], n)
  return { along: rate(along), across: rate(across), shareAlong: rate(shareAlong, s), shareAcross: rate(shareAcross, w) }
}

interface Drift { value: [number, number], covariance: { c11: number, c12: number, c22: number } }

/** Drift vector of a row with its covariance; null where χ₁ or χ₂ is not known. */
export function driftOfRow({ figures: { chi1, chi2 } }: Pick<LoadedRow, 'figures'>): Drift | null {
  if (!chi1 || !chi2) return null
  return {
    value: [chi1.value, chi2.value],
    covariance: { c11: covarianceOfLoaded(chi1, chi1), c12: covarianceOfLoaded(chi1, chi2), c22: covarianceOfLoaded(chi2, chi2) }
  }
}

function largest({ c11, c12, c22 }: Drift['covariance']): number {
  return (c11 + c22) / 2 + Math.hypot((c11 - c22) / 2, c12)
}

function chainOf({ rows, causes }: LoadedBudget): DriftLink[] {
  let [x, y] = [exactly(0, causes), exactly(0, causes)]
  return rows.flatMap(({ key, name, figures: { chi1, chi2 } }) => {
    if (!chi1 && !chi2) return []
    const from: [number, number] = [x.value, y.value]
    x = combine([[1, x], ...(chi1 ? [[1, chi1] as const] : [])], causes)
    y = combine([[1, y], ...(chi2 ? [[1, chi2] as const] : [])], causes)
    return [{ key, name, from, to: [x.value, y.value] as [number, number], covariance: driftOfRow({ figures: { chi1: x, chi2: y } })!.covariance }]
  })
}

/** χ² of the residual trends: the noise of the observed ones is the diagonal, every other cause a factor. */
function closureOfTrends({ residual, observed, causes }: LoadedBudget, input: RunInput): Closure {
  const quantities = rotationQuantities.filter(quantity => residual.figures[quantity])
  if (quantities.length === 0) return { quoted: false, reason: 'No closure is quoted: nothing is observed.' }
  const noise = quantities.map(quantity => sigmaOf(observed.figures[quantity]!))
  if (noise.some(sigma => !(sigma > 0))) return { quoted: false, reason: 'No closure is quoted: an observed trend has no error.' }
  const factors = Array.from({ length: causes }, (_, c) => Float64Array.from(quantities, quantity => residual.figures[quantity]!.loadings[c]! - observed.figures[quantity]!.loadings[c]!))
    .flatMap((loading, c) => loading.some(v => v !== 0) ? [{ source: String(c), loading }] : [])
  return closureOf(quantities.map(quantity => residual.figures[quantity]!.value), { diagonal: Float64Array.from(noise, s => s * s), factors }, quantities, input)
}
