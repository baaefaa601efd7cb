import type { GridVariable } from './gridFile.ts'

export interface Block { start: number[], count: number[] }

/** Values that one block holds at most, but for a single stored piece that is larger: 32 MB in double precision. */
const MOST_VALUES = 4_000_000

/**
 * Cuts a part of a variable into blocks that are read one after the other. Pieces that are stored together are read together, so that none
 * is unpacked twice, and the dimensions that lie closest in the file are taken whole first.
 *
 * @param start first place along each dimension
 * @param count places along each dimension
 */
export function blocksOf(variable: Pick<GridVariable, 'chunks'>, start: number[], count: number[], most = MOST_VALUES): Block[] {
  const n = start.length
  const step = count.map((c, d) => Math.max(1, Math.min(c, variable.chunks?.[d] ?? 1)))
  for (let d = n - 1; d >= 0; d--) {
    const others = step.reduce((product, s, k) => k === d ? product : product * s, 1)
    const fits = Math.floor(most / others / step[d]!) * step[d]!
    if (fits > step[d]!) step[d] = Math.min(count[d]!, fits)
    if (step[d]! < count[d]!) break
  }
  const blocks: Block[] = []
  if (count.some(c => c === 0)) return blocks
  const first = start.map((from, d) => firstOf(from, step[d]!, variable.chunks?.[d]))
  const index = [...first]
  for (;;) {
    blocks.push({
      start: index.map((at, d) => Math.max(at, start[d]!)),
      count: index.map((at, d) => Math.min(at + step[d]!, start[d]! + count[d]!) - Math.max(at, start[d]!))
    })
    let d = n - 1
    for (; d >= 0; d--) {
      index[d] = index[d]! + step[d]!
      if (index[d]! < start[d]! + count[d]!) break
      index[d] = first[d]!
    }
    if (d < 0) return blocks
  }
}

/** Where blocks begin so that they meet the borders of stored pieces. */
function firstOf(from: number, step: number, chunk: number | undefined): number {
  return chunk !== undefined && step % chunk === 0 ? from - from % chunk : from
}
