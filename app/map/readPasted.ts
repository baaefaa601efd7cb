import { readOutlineFile, requireOutline, type NamedOutline } from '#shared/geo/outline'
import { parseCoordinates, type CoordinateOrder } from '#shared/geo/parseCoordinates'

export interface ReadOutlines {
  outlines: NamedOutline[]
  /** Features of a file that are no areas. */
  leftOut: number
  /** From a list of coordinates, not from a file. */
  typed: boolean
}

/** Outlines from a text: GeoJSON where it begins like JSON, else coordinates line by line. Throws InputError. */
export function readPasted(text: string, order: CoordinateOrder): ReadOutlines {
  if (/^\uFEFF?\s*[{[]/.test(text)) return { ...readOutlineFile(text), typed: false }
  const { ring } = parseCoordinates(text, { order })
  return { outlines: [{ geometry: requireOutline({ type: 'Polygon', coordinates: [ring] }) }], leftOut: 0, typed: true }
}
