import { contourOf } from './contour.ts'
import type { CellExcess, Contour, DegreeTwoMeans, MeanVector } from './contour.ts'

/** How a region's mass lies in it, cell by cell: what each cell holds of a gigatonne beyond its part of the area. */
export interface CellPattern {
  /** What the pattern is of: the trends of the cells, or how the cells vary with the region's whole mass. */
  basis: 'trend' | 'variation'
  /** SHA-256 of the file of the grid. */
  gridSha256: string
  /** Bounds of the cells, degrees of longitude and geodetic latitude; all are equally wide. */
  stepDeg: number
  westDeg: number[]
  southDeg: number[]
  northDeg: number[]
  /** Of one gigatonne of the region, what lies in the cell more than an even spread would put there, Gt; the sum is zero. */
  excess: number[]
}

/**
 * An outline whose mass lies as a pattern says. Area, centre and rings stay those of the outline; the means become those of the pattern:
 * ⟨f⟩ = ⟨f⟩ of the even spread + Σ excess × ⟨f⟩ of the cell. Since the excesses sum to zero, mass is kept, and a pattern without structure
 * is the even spread to the last digit.
 */
export function withPattern(contour: Contour, pattern: CellPattern | null | undefined): Contour {
  if (!pattern) return contour
  const cells = cellsOf(pattern)
  const means: DegreeTwoMeans = { ...contour.means }
  const vector: MeanVector = { ...contour.vector }
  for (const { contour: cell, excess } of cells) {
    for (const name of ['xz', 'yz', 'cos2'] as const) means[name] += excess * cell.means[name]
    for (const name of ['x', 'y', 'z'] as const) vector[name] += excess * cell.vector[name]
  }
  return { ...contour, means, vector, cells }
}

/** Part of a gigatonne that lies elsewhere than an even spread would put it, 0 to 1 where no cell goes against the whole. */
export function movedPart({ excess }: Pick<CellPattern, 'excess'>): number {
  return excess.reduce((sum, e) => sum + Math.abs(e), 0) / 2
}

function cellsOf({ stepDeg, westDeg, southDeg, northDeg, excess }: CellPattern): CellExcess[] {
  return excess.flatMap((e, i) => {
    if (e === 0) return []
    const [west, east, south, north] = [westDeg[i]!, westDeg[i]! + stepDeg, southDeg[i]!, northDeg[i]!]
    return [{ excess: e, contour: contourOf({ type: 'Polygon', coordinates: [[[west, south], [east, south], [east, north], [west, north], [west, south]]] }) }]
  })
}
