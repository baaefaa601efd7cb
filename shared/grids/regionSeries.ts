import { KG_PER_GT, WATER_DENSITY } from '../earth/constants.ts'
import { contourOf } from '../earth/contour.ts'
import type { Contour } from '../earth/contour.ts'
import { formatArea, formatDate, formatShare, formatSignificant } from '../format/numbers.ts'
import { allAtOnce, withPauses } from '../series/steps.ts'
import type { PaceOptions, Steps } from '../series/steps.ts'
import type { Outline } from '../types/domain.ts'
import { InputError } from '../types/issue.ts'
import type { Issue } from '../types/issue.ts'
import { blocksOf } from './blocks.ts'
import type { Block } from './blocks.ts'
import { cellResponses, effectNames } from './cellResponse.ts'
import type { CellResponses, EffectOptions, Effects } from './cellResponse.ts'
import { cellWeights } from './cellWeights.ts'
import type { CellWeights } from './cellWeights.ts'
import type { OpenGrid } from './heightGrid.ts'
import { patternOf } from './pattern.ts'
import type { FoundPattern } from './pattern.ts'

export interface RegionSeriesOptions {
  /** Metres of water per unit of the grid; absent: by the variable's units. */
  metresPerUnit?: number
  /** Part of each cell that is sea, 0 to 1, in the file's order: cells of which half or more is sea are left out. Null: none is. */
  sea?: Float64Array | null
  /** Factor on each cell's height, in the file's order; NaN leaves the cell out. */
  scale?: Float64Array | null
  /** Part of the region's cells, by area, that may lack a value in a month without the month being left out; default 0. */
  mostMissing?: number
  /** Computes the effect with the grid's own pattern as well. */
  effect?: EffectOptions
  /** Finds how the mass lies in each region, for runs; `gridSha256` of the file. */
  pattern?: { gridSha256: string }
}

/** Values of cells that are kept for patterns at once; more would not fit in memory. */
const MOST_CELL_VALUES = 1e8

/** A region's series from a grid. */
export interface RegionGridSeries {
  id: string
  mjd: number[]
  startMjd: number[] | null
  endMjd: number[] | null
  /** Σ height × area inside × 1000 kg/m³ over the cells that are used, Gt. */
  massGt: number[]
  /** Mean height over the same cells, m of water. */
  heightM: number[]
  /** The outline's area on the ellipsoid and what became of it, m²: usedM2 + seaM2 + missingM2 + outsideM2 = areaM2. */
  areaM2: number
  usedM2: number
  seaM2: number
  /** Cells that have a value at no epoch, or no scale factor. */
  missingM2: number
  outsideM2: number
  cells: number
  /** Epochs that were left out, with the reason. */
  issues: Issue[]
  /** How the series was made, in sentences. */
  steps: string[]
  /** Effect at each epoch: with the grid's pattern, and with the mass spread evenly over the region. Null where it was not asked for. */
  effect: { pattern: Effects<number[]>, even: Effects<number[]> } | null
  /** How the mass lies in the region; null where it was not asked for or does not change. */
  pattern: FoundPattern | null
}

export interface GridRegion { id: string, geometry: Outline }

/**
 * Series of regions from a grid of heights, by exact area weights of the cells that each outline cuts. The grid is read once, block by
 * block, whatever its size.
 *
 * @throws InputError for a grid without time or without a unit of height, or a region that the grid does not cover at all
 */
export function regionSeries(grid: OpenGrid, regions: readonly GridRegion[], options: RegionSeriesOptions = {}): RegionGridSeries[] {
  return allAtOnce(regionSteps(grid, regions, options))
}

/** As `regionSeries`, with pauses and progress, and to be cancelled. */
export function regionSeriesPaced(grid: OpenGrid, regions: readonly GridRegion[], options: RegionSeriesOptions, pace: PaceOptions): Promise<RegionGridSeries[]> {
  return withPauses(regionSteps(grid, regions, options), pace)
}

/** A region with its cells and the sums that grow while the grid is read. */
interface Gathered {
  id: string
  contour: Contour
  weights: CellWeights
  /** Metres times this is mass: area inside, and the cell's scale factor; 0 for cells that are left out. */
  factor: Float64Array
  responses: CellResponses | null
  seaM2: number
  valid: Int32Array
  /** Per epoch: Σ height × area (m³ in the grid's unit), area of cells without a value, and effects. */
  sum: Float64Array
  missing: Float64Array
  effects: Effects<Float64Array> | null
  /** Height × area of every cell at every epoch, for its pattern. */
  volumes: Float32Array | null
}

function* regionSteps(grid: OpenGrid, regions: readonly GridRegion[], options: RegionSeriesOptions): Steps<RegionGridSeries[]> {
  if (!grid.time) throw problem('no-time', `“${grid.variable.name}” has no time: a series needs one.`)
  const metres = options.metresPerUnit ?? grid.candidate.metresPerUnit
  if (metres === null) throw problem('no-unit', `The unit of “${grid.variable.name}”, ${grid.candidate.units === null ? 'which the file does not state,' : `“${grid.candidate.units}”,`} is not one of water-equivalent height: say what it is.`)
  const epochs = grid.time.mjd.length
  const known = new Map<number, Effects<number>>()
  const gathered: Gathered[] = []
  for (const region of regions) {
    gathered.push(prepare(grid, region, epochs, options, known))
    yield 0.1 * gathered.length / regions.length
  }
  if (options.pattern) keepVolumes(gathered, epochs)
  const blocks = wantedBlocks(grid, gathered)
  for (let b = 0; b < blocks.length; b++) {
    addBlock(grid, blocks[b]!, gathered)
    yield 0.1 + 0.9 * (b + 1) / blocks.length
  }
  return gathered.map(region => finish(grid, region, metres, options))
}

function prepare(grid: OpenGrid, { id, geometry }: GridRegion, epochs: number, options: RegionSeriesOptions, known: Map<number, Effects<number>>): Gathered {
  const contour = contourOf(geometry)
  const weights = cellWeights(contour, grid.latitude, grid.longitude)
  const n = weights.row.length
  if (n === 0) throw problem('not-covered', `The grid does not reach the region “${id}”.`)
  const columns = grid.longitude.column.length
  const factor = new Float64Array(n)
  let seaM2 = 0
  for (let i = 0; i < n; i++) {
    const cell = weights.row[i]! * columns + weights.column[i]!
    const scale = options.scale ? options.scale[cell]! : 1
    if (options.sea && options.sea[cell]! >= 0.5) seaM2 += weights.areaM2[i]!
    else factor[i] = Number.isNaN(scale) ? 0 : weights.areaM2[i]! * scale
  }
  return {
    id, contour, weights, factor, seaM2,
    responses: options.effect ? cellResponses(contour, weights, grid, options.effect, known) : null,
    valid: new Int32Array(n),
    sum: new Float64Array(epochs),
    missing: new Float64Array(epochs),
    effects: options.effect ? { chi1Mas: new Float64Array(epochs), chi2Mas: new Float64Array(epochs), lodMicroseconds: new Float64Array(epochs), deltaJ2: new Float64Array(epochs) } : null,
    volumes: null
  }
}

function keepVolumes(regions: Gathered[], epochs: number): void {
  const values = epochs * regions.reduce((sum, region) => sum + region.factor.length, 0)
  if (values > MOST_CELL_VALUES) throw problem('too-many-cells', `These regions have ${values / epochs} cells over ${epochs} epochs: take fewer regions at once.`)
  for (const region of regions) region.volumes = new Float32Array(region.factor.length * epochs)
}

/** Blocks of the smallest part of the grid that holds all cells of all regions. */
function wantedBlocks(grid: OpenGrid, regions: readonly Gathered[]): Block[] {
  const bounds = (pick: (w: CellWeights) => Int32Array): [number, number] => {
    let [low, high] = [Infinity, -1]
    for (const { weights } of regions) {
      for (const at of pick(weights)) {
        low = Math.min(low, at)
        high = Math.max(high, at)
      }
    }
    return [low, high - low + 1]
  }
  const [row, rows] = bounds(w => w.row)
  const [column, columns] = bounds(w => w.column)
  const { time, latitude, longitude } = grid.dimension
  const start = grid.variable.dimensions.map((_, d) => d === latitude ? row : d === longitude ? column : 0)
  const count = grid.variable.dimensions.map((dim, d) => d === latitude ? rows : d === longitude ? columns : d === time ? dim.size : 1)
  return regions.length === 0 ? [] : blocksOf(grid.variable, start, count)
}

function addBlock(grid: OpenGrid, { start, count }: Block, regions: readonly Gathered[]): void {
  const raw = grid.variable.read(start, count)
  const stride = (d: number): number => count.slice(d + 1).reduce((n, c) => n * c, 1)
  const { time, latitude, longitude } = grid.dimension
  const [strideT, strideY, strideX] = [stride(time), stride(latitude), stride(longitude)]
  const [t0, y0, x0] = [start[time]!, start[latitude]!, start[longitude]!]
  const [nt, ny, nx] = [count[time]!, count[latitude]!, count[longitude]!]
  for (const region of regions) {
    const { weights, factor, responses, effects, volumes } = region
    const epochs = region.sum.length
    for (let i = 0; i < factor.length; i++) {
      const y = weights.row[i]! - y0
      const x = weights.column[i]! - x0
      if (factor[i] === 0 || y < 0 || y >= ny || x < 0 || x >= nx) continue
      const at = y * strideY + x * strideX
      for (let t = 0; t < nt; t++) {
        const value = grid.unpack(raw[at + t * strideT]!)
        if (Number.isNaN(value)) {
          region.missing[t0 + t] = region.missing[t0 + t]! + weights.areaM2[i]!
          continue
        }
        region.valid[i] = region.valid[i]! + 1
        const volume = value * factor[i]!
        region.sum[t0 + t] = region.sum[t0 + t]! + volume
        if (volumes) volumes[i * epochs + t0 + t] = volume
        if (effects) for (const name of effectNames) effects[name][t0 + t] = effects[name][t0 + t]! + volume * responses!.cells[name][i]!
      }
    }
  }
}

function finish(grid: OpenGrid, region: Gathered, metres: number, options: RegionSeriesOptions): RegionGridSeries {
  const { contour, weights, factor, seaM2, responses, effects } = region
  const time = grid.time!
  let [usedM2, missingM2, cells, always] = [0, 0, 0, 0]
  for (let i = 0; i < factor.length; i++) {
    const areaM2 = weights.areaM2[i]!
    if (factor[i] !== 0 && region.valid[i]! > 0) {
      usedM2 += areaM2
      cells++
    } else if (factor[i] !== 0) always += areaM2
  }
  missingM2 = contour.areaM2 - usedM2 - seaM2 - weights.outsideM2
  if (cells === 0) throw problem('not-covered', `No cell of the grid has a value inside the region “${region.id}”.`)
  const gtPerVolume = metres * WATER_DENSITY / KG_PER_GT
  const order = Array.from(time.mjd, (_, t) => t).sort((a, b) => time.mjd[a]! - time.mjd[b]!)
  const issues: Issue[] = []
  const kept: number[] = []
  for (const t of order) {
    const lacking = Math.max(0, region.missing[t]! - always) / usedM2
    const twice = kept.length > 0 && time.mjd[kept.at(-1)!] === time.mjd[t]
    if (twice) issues.push({ row: t + 1, value: formatDate(time.mjd[t]!), code: 'duplicate-epoch', message: 'The epoch stands in the grid twice; the first is used.' })
    else if (lacking > (options.mostMissing ?? 0) + 1e-9) issues.push({ row: t + 1, value: formatDate(time.mjd[t]!), code: 'cells-missing', message: `${formatShare(lacking, lacking < 0.1 ? 1 : 0).replace('+', '')} of the region has no value at this epoch; it is left out.` })
    else kept.push(t)
  }
  const massGt = kept.map(t => region.sum[t]! * gtPerVolume)
  return {
    id: region.id,
    mjd: kept.map(t => time.mjd[t]!),
    startMjd: time.startMjd && kept.map(t => time.startMjd![t]!),
    endMjd: time.endMjd && kept.map(t => time.endMjd![t]!),
    massGt,
    heightM: kept.map(t => region.sum[t]! * metres / usedM2),
    areaM2: contour.areaM2,
    usedM2, seaM2, missingM2: Math.max(0, missingM2), outsideM2: weights.outsideM2,
    cells,
    issues,
    steps: stepsOf(grid, region, { usedM2, cells, missingM2 }, metres, options),
    effect: effects && {
      pattern: perEpoch(name => kept.map(t => effects[name][t]! * gtPerVolume)),
      even: perEpoch(name => massGt.map(m => m * responses!.even[name]))
    },
    pattern: region.volumes && patternOf({ values: region.volumes, epochs: region.sum.length }, weights, grid, time.mjd, kept, options.pattern!.gridSha256)
  }
}

function perEpoch(of: (name: typeof effectNames[number]) => number[]): Effects<number[]> {
  return { chi1Mas: of('chi1Mas'), chi2Mas: of('chi2Mas'), lodMicroseconds: of('lodMicroseconds'), deltaJ2: of('deltaJ2') }
}

function stepsOf(grid: OpenGrid, region: Gathered, { usedM2, cells, missingM2 }: { usedM2: number, cells: number, missingM2: number }, metres: number, options: RegionSeriesOptions): string[] {
  const area = (m2: number): string => formatArea(m2 / 1e6)
  const { variable, candidate, time, longitude } = grid
  const steps = [
    `Heights are “${variable.name}”${candidate.units ? ` in ${candidate.units}` : ''}: 1 is ${formatSignificant(metres, 4)} m of water.`,
    `${cells} cells of ${formatSignificant(longitude.stepDeg, 3)}° are weighted with their area inside the outline, ${area(usedM2)} of ${area(region.contour.areaM2)} on the ellipsoid, at ${WATER_DENSITY} kg/m³.`
  ]
  if (time!.calendar !== 'standard' && time!.calendar !== 'proleptic_gregorian') steps.push(`Times are of the calendar “${time!.calendar}” and were put on the dates of the Gregorian one.`)
  if (time!.startMjd) steps.push('Epochs are the middles of the bounds of time.')
  if (options.scale) steps.push('Each cell’s height is multiplied by its scale factor.')
  if (options.sea) steps.push(`Cells of which half or more is sea are left out, ${area(region.seaM2)}: the sea’s part is computed here from the mass itself.`)
  if (missingM2 > 1e-6 * region.contour.areaM2) steps.push(`${area(missingM2)} have no value in the grid and count nothing.`)
  if (region.weights.outsideM2 > 1e-6 * region.contour.areaM2) steps.push(`${area(region.weights.outsideM2)} lie outside the grid and count nothing.`)
  return steps
}

function problem(code: string, message: string): InputError {
  return new InputError('The grid does not give a series', [{ path: 'grid', code, message }])
}
