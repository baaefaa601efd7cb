import { formatNumber, noFigure } from './digits.ts'

/** Longitude folded into (−180, 180]. */
export function foldLongitude(degrees: number): number {
  const folded = ((degrees % 360) + 540) % 360 - 180
  return folded === -180 ? 180 : folded
}

function withSide(degrees: number, digits: number, positive: string, negative: string, bare: number[]): string {
  const text = formatNumber(Math.abs(degrees), digits)
  if (bare.includes(Number(text))) return `${Number(text)}°`
  return `${text}°\u00a0${degrees < 0 ? negative : positive}`
}

/** East longitude in degrees as 35° W; 0° and 180° belong to no side. */
export function formatLongitude(degrees: number | null | undefined, digits = 0): string {
  if (degrees === null || degrees === undefined || !Number.isFinite(degrees)) return noFigure
  return withSide(foldLongitude(degrees), digits, 'E', 'W', [0, 180])
}

/** Latitude in degrees as 73.9° N. */
export function formatLatitude(degrees: number | null | undefined, digits = 0): string {
  if (degrees === null || degrees === undefined || !Number.isFinite(degrees)) return noFigure
  return withSide(degrees, digits, 'N', 'S', [0])
}

/** [longitude, latitude] as 73.9° N 41.2° W. */
export function formatPosition(position: readonly [number, number], digits = 1): string {
  return `${formatLatitude(position[1], digits)} ${formatLongitude(position[0], digits)}`
}

/** A one-sigma of a direction beyond this leaves the direction open. */
export const openDirectionDeg = 60

/** Direction on the pole plane, 30° ± 5° W; `no direction` where there is no drift or its sigma leaves it open. */
export function formatDirection(direction: { value: number, sigma: number | null } | null | undefined): string {
  if (!direction || !Number.isFinite(direction.value)) return 'no direction'
  const { value, sigma } = direction
  if (sigma === null || !Number.isFinite(sigma)) return formatLongitude(value)
  if (sigma > openDirectionDeg) return 'no settled direction'
  const digits = sigma > 0 && sigma < 0.95 ? 1 : 0
  const [degrees, side] = formatLongitude(value, digits).split('\u00a0') as [string, string?]
  const error = formatNumber(sigma, digits)
  // A direction that is fixed by the outline alone has no error that its digits could show.
  const shown = /[1-9]/.test(error) ? `±\u00a0${error}°` : ''
  return [degrees, shown, side].filter(Boolean).join('\u00a0')
}
