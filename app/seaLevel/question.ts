import { formatPosition } from '#shared/format/numbers'
import { parsePlace } from '#shared/geo/parseCoordinates'
import type { Position } from '#shared/types/domain'

/** What a map of the sea is asked for; it stands in the address. */
export interface SeaLevelQuestion {
  feedback: boolean
  as: 'mm' | 'mean'
  /** Longitude and latitude, in the order of the table. */
  places: Position[]
  /** What the address holds that is no place. */
  faults: string[]
}

/** More rows than this are better taken from the grid. */
export const mostPlaces = 40

type Query = Readonly<Record<string, unknown>>

/** `?feedback=off&as=mean&at=38.7,-9.1;−33.9,18.4` */
export function questionOf(query: Query): SeaLevelQuestion {
  const parts = typeof query.at === 'string' ? query.at.split(';').filter(part => part.trim()) : []
  const places: Position[] = []
  const faults: string[] = []
  for (const part of parts) {
    try {
      places.push(parsePlace(part))
    }
    catch (error) {
      faults.push(`“${part.slice(0, 60)}” in the address: ${error instanceof Error ? error.message : 'no place'}`)
    }
  }
  return { feedback: query.feedback !== 'off', as: query.as === 'mean' ? 'mean' : 'mm', places: places.slice(0, mostPlaces), faults }
}

const short = (degrees: number) => String(Math.round(degrees * 1e4) / 1e4 + 0)

/** Places as the address and the interface write them: latitude, longitude. */
export function placesText(places: readonly Position[]): string | undefined {
  return places.length ? places.map(([lon, lat]) => `${short(lat)},${short(lon)}`).join(';') : undefined
}

/** The list with the places of a text added, one a line or with semicolons between them; or what is wrong with it. */
export function withPlaces(known: readonly Position[], text: string): { places: Position[], fault: null } | { places: null, fault: string } {
  const parts = text.split(/[;\n]/).filter(part => part.trim())
  const failed = (fault: string) => ({ places: null, fault })
  if (!parts.length) return failed('Type a latitude and a longitude first.')
  const places = [...known]
  for (const part of parts) {
    let place: Position
    try {
      place = parsePlace(part)
    }
    catch (error) {
      return failed(`“${part.trim()}”: ${error instanceof Error ? error.message : 'no place'}`)
    }
    if (places.some(([lon, lat]) => short(lon) === short(place[0]) && short(lat) === short(place[1]))) return failed(`${formatPosition(place, 2)} is in the table already.`)
    places.push(place)
  }
  if (places.length > mostPlaces) return failed(`At most ${mostPlaces} places; take the grid for more.`)
  return { places, fault: null }
}
