import { formatNumber, formatSigned, hardSpace } from './digits.ts'

/** Area in km² to about four significant digits: 1 712 000 km². */
export function formatArea(areaKm2: number | null | undefined): string {
  const step = areaKm2 && areaKm2 >= 1e5 ? 10 ** (Math.floor(Math.log10(areaKm2)) - 3) : 1
  const rounded = areaKm2 === null || areaKm2 === undefined ? areaKm2 : Math.round(areaKm2 / step) * step
  const digits = areaKm2 && areaKm2 < 100 ? 2 : 0
  return `${formatNumber(areaKm2 && areaKm2 < 100 ? areaKm2 : rounded, digits)}${hardSpace}km²`
}

/** Mass in gigatonnes, signed: −214 Gt. */
export function formatGt(massGt: number | null | undefined, digits = 0): string {
  return `${formatSigned(massGt, digits)}${hardSpace}Gt`
}

/** A figure with its unit: 5.15 µs/yr. */
export function withUnit(figure: string, unit: string): string {
  return `${figure}${hardSpace}${unit}`
}
