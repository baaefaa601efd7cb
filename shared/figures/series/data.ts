/** What a line stands for; decides its colour, weight and dashes everywhere. */
export type SeriesRole = 'observed' | 'model' | 'residual' | 'loss' | 'gain' | 'neutral' | 'secular'

export interface FigureSeries {
  /** Written beside the line. */
  label: string
  role: SeriesRole
  /** Ascending. */
  mjd: ArrayLike<number>
  /** null or NaN is a gap. */
  value: ArrayLike<number | null>
  /** One-sigma; drawn as a band. */
  sigma?: ArrayLike<number | null> | null
  /** Distance in days beyond which neighbours are not joined; no limit unless told. */
  maxGapDays?: number
}

export interface SeriesData {
  series: FigureSeries[]
  /** Unit of the values, written at the axis. */
  unit: string
  /** What is drawn, for the title that screen readers say. */
  title: string
  /** Strip of the time that is covered, one row each. */
  coverage?: { label: string, spans: [number, number][] }[]
  /** A stretch of time set apart, MJD. */
  highlight?: { fromMjd: number, toMjd: number } | null
  /** Shown span; the whole of the data unless told. */
  fromMjd?: number
  toMjd?: number
  /** Shown values; the whole of the data in the span unless told. */
  low?: number
  high?: number
}

/** A stretch of points without a gap. */
export interface Run { mjd: number[], value: number[], low: number[], high: number[] }

/**
 * The stretches of a series between gaps inside a span. A point on either side of the span is kept, so that the line runs
 * out of the drawing.
 */
export function runsOf(series: FigureSeries, fromMjd = -Infinity, toMjd = Infinity): Run[] {
  const runs: Run[] = []
  const first = Math.max(0, lowerBound(series.mjd, fromMjd) - 1)
  const last = Math.min(series.mjd.length - 1, lowerBound(series.mjd, toMjd) + 1)
  const limit = series.maxGapDays ?? Infinity
  const missing = (i: number): boolean => {
    const value = series.value[i]
    return value === null || value === undefined || !Number.isFinite(value) || !Number.isFinite(series.mjd[i]!)
  }
  for (let start = first; start <= last;) {
    if (missing(start)) {
      start++
      continue
    }
    let end = start + 1
    while (end <= last && !missing(end) && series.mjd[end]! - series.mjd[end - 1]! <= limit) end++
    runs.push(stretchOf(series, start, end))
    start = end
  }
  return runs
}

/** A stretch without a gap. Sixty years of days are drawn anew at each brush: no list grows here, and one without sigma is its own band. */
function stretchOf({ mjd, value, sigma }: FigureSeries, start: number, end: number): Run {
  const part = (at: (i: number) => number): number[] => {
    const list = new Array<number>(end - start)
    for (let i = start; i < end; i++) list[i - start] = at(i)
    return list
  }
  const values = part(i => value[i]!)
  if (!sigma) return { mjd: part(i => mjd[i]!), value: values, low: values, high: values }
  const errorOf = (i: number): number => {
    const given = sigma[i]
    return given !== null && given !== undefined && Number.isFinite(given) ? Math.abs(given) : 0
  }
  return { mjd: part(i => mjd[i]!), value: values, low: part(i => value[i]! - errorOf(i)), high: part(i => value[i]! + errorOf(i)) }
}

/** Index of the first entry that is not below x. */
export function lowerBound(sorted: ArrayLike<number>, x: number): number {
  let [low, high] = [0, sorted.length]
  while (low < high) {
    const middle = (low + high) >> 1
    if (sorted[middle]! < x) low = middle + 1
    else high = middle
  }
  return low
}

/**
 * The same stretch with at most four points per column of a drawing: first, lowest, highest and last, in order. The line
 * looks the same to the pixel, however many points there are.
 */
export function decimated(run: Run, columnOf: (mjd: number) => number): Run {
  const result: Run = { mjd: [], value: [], low: [], high: [] }
  let start = 0
  while (start < run.mjd.length) {
    const column = Math.floor(columnOf(run.mjd[start]!))
    let end = start + 1
    while (end < run.mjd.length && Math.floor(columnOf(run.mjd[end]!)) === column) end++
    let [least, most] = [start, start]
    let [low, high] = [Infinity, -Infinity]
    for (let i = start; i < end; i++) {
      if (run.value[i]! < run.value[least]!) least = i
      if (run.value[i]! > run.value[most]!) most = i
      low = Math.min(low, run.low[i]!)
      high = Math.max(high, run.high[i]!)
    }
    const kept = [...new Set([start, least, most, end - 1])].sort((a, b) => a - b)
    for (const i of kept) {
      result.mjd.push(run.mjd[i]!)
      result.value.push(run.value[i]!)
      result.low.push(end - start > 1 ? low : run.low[i]!)
      result.high.push(end - start > 1 ? high : run.high[i]!)
    }
    start = end
  }
  return result
}
