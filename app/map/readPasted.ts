import { readOutlineFeatures, requireOutline, type OutlineFeatures } from '#shared/geo/outline'
import { parseCoordinates, type CoordinateOrder } from '#shared/geo/parseCoordinates'

export interface ReadOutlines extends OutlineFeatures {
  /** From a list of coordinates, not from a file. */
  typed: boolean
}

/** Outlines from a text: GeoJSON where it begins like JSON, else coordinates line by line. Throws InputError. */
export function readPasted(text: string, order: CoordinateOrder): ReadOutlines {
  if (/^\uFEFF?\s*[{[]/.test(text)) return { ...readOutlineFeatures(text), typed: false }
  const { ring } = parseCoordinates(text, { order })
  return { outlines: [{ geometry: requireOutline({ type: 'Polygon', coordinates: [ring] }) }], faulty: [], leftOut: 0, typed: true }
}
