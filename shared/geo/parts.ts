import type { Outline, Position } from '../types/domain.ts'

/** The outline as a list of polygons, each a list of rings with the shell first. */
export function polygonsOf(outline: Outline): Position[][][] {
  return outline.type === 'Polygon' ? [outline.coordinates] : outline.coordinates
}
