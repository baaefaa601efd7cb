import type { Position } from '../types/domain.ts'
import type { Issue } from '../types/issue.ts'

/** Positions that one fault is shown with: a long ring is thinned to this, so that a refusal stays short. */
const mostPlaces = 100

/** Where a fault is: the lines that are wrong, and a place on them. */
export type FaultPlace = Pick<Issue, 'lines'> & { near: Position | null }

/**
 * The stretch of a ring from position `from` to position `to`, by the end of the ring where `to` is smaller. What is no place on the Earth is passed
 * over, so that its neighbours show where it is missing; no lines where fewer than two places are left.
 */
export function stretchOf(ring: readonly unknown[], from = 0, to = ring.length - 1): FaultPlace {
  const indices = from <= to ? span(from, to) : [...span(from, ring.length - 1), ...span(0, to)]
  const places = indices.map(k => ring[k]).filter(isPlace).map(([lon, lat]): Position => [lon, lat])
  return { ...(places.length > 1 ? { lines: [thinned(places)] } : {}), near: places[0] ?? null }
}

/** The lines that issues show as wrong. */
export function linesOf(issues: readonly Issue[]): Position[][] {
  return issues.flatMap(issue => issue.lines ?? [])
}

/** As words: “1.0000° N, 2.0000° E”. */
export function placeWords([lonDeg, latDeg]: Position): string {
  const lon = lonDeg - 360 * Math.round(lonDeg / 360)
  return `${degrees(latDeg, 'N', 'S')}, ${degrees(lon, 'E', 'W')}`
}

/** A ring by what it is, counted from 1: “the shell”, “hole 2”, “part 3”, “hole 1 of part 3”. */
export function ringWords(polygon: number, ring: number, isOnePolygon: boolean): string {
  if (isOnePolygon) return ring === 0 ? 'the shell' : `hole ${ring}`
  return ring === 0 ? `part ${polygon + 1}` : `hole ${ring} of part ${polygon + 1}`
}

export function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1)
}

function span(from: number, to: number): number[] {
  return Array.from({ length: to - from + 1 }, (_, k) => from + k)
}

function isPlace(value: unknown): value is Position {
  if (!Array.isArray(value)) return false
  const [lon, lat] = value as unknown[]
  return Number.isFinite(lon) && Number.isFinite(lat) && Math.abs(lat as number) <= 90 && Math.abs(lon as number) <= 720
}

function thinned(places: Position[]): Position[] {
  if (places.length <= mostPlaces) return places
  return Array.from({ length: mostPlaces }, (_, k) => places[Math.round(k * (places.length - 1) / (mostPlaces - 1))]!)
}

function degrees(value: number, positive: string, negative: string): string {
  return `${Math.abs(value).toFixed(4)}° ${value < 0 ? negative : positive}`
}
