import { contourOf } from '../earth/contour.ts'
import type { Outline, RegionKind } from '../types/domain.ts'
import { cutAtAntimeridian } from './cut.ts'
import { polygonsOf } from './parts.ts'

/** An outline on its way into a file, with what the file says of it. */
export interface WrittenOutline { name: string, kind?: RegionKind, agency?: string, geometry: Outline }

/**
 * The outline as every reader of a file understands it: cut at ±180° and closed along ±90° where it reaches over them, else as it is.
 * Longitudes in degrees within ±180°; the region, its area in m², stays the same.
 */
export function outlineForFile(outline: Outline): Outline {
  const plain = polygonsOf(outline).flat().every(ring => ring.every(([lon], k) => Math.abs(lon) <= 180 && Math.abs(lon - (ring[k - 1]?.[0] ?? lon)) <= 180))
  return plain && contourOf(outline).rings.every(ring => ring.pole === null) ? outline : cutAtAntimeridian(outline)
}
