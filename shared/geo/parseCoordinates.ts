import type { Position } from '../types/domain.ts'
import { InputError, type Issue } from '../types/issue.ts'
import { parseAngle, type Angle } from './parseAngle.ts'

export type CoordinateOrder = 'lat-lon' | 'lon-lat'

/**
 * A closed ring from pasted lines of two coordinates each, as people keep them: `51.5, −0.12`, `51.5N 0.12W`, `51°30′00″N 0°07′12″W`.
 * `order` holds where no letter and no header line says which is which. Throws InputError with the row of each line that does not read.
 */
export function parseCoordinates(text: string, options: { order?: CoordinateOrder } = {}): { ring: Position[], order: CoordinateOrder } {
  const lines = text.split(/\r\n|\r|\n/).map((line, k) => ({ row: k + 1, line: line.trim() }))
    .filter(({ line }) => line !== '' && !line.startsWith('#'))
  const header = lines[0] ? orderOfHeader(lines[0].line) : null
  if (header) lines.shift()
  const order = header ?? options.order ?? 'lat-lon'
  const issues: Issue[] = []
  const ring: Position[] = []
  for (const { row, line } of lines) {
    const read = readLine(line, order)
    if (typeof read === 'string') issues.push({ row, value: line.slice(0, 60), code: 'coordinate', message: read })
    else ring.push(read)
  }
  if (issues.length > 0) {
    const [first] = issues
    throw new InputError(issues.length === 1 ? `Row ${first!.row}: ${first!.message}` : `${issues.length} rows do not read as coordinates.`, issues.slice(0, 50))
  }
  const [first, last] = [ring[0], ring.at(-1)]
  if (first && last && ring.length > 1 && first[0] === last[0] && first[1] === last[1]) ring.pop()
  if (ring.length < 3) {
    const message = `An outline needs at least three places; there ${ring.length === 1 ? 'is 1' : `are ${ring.length}`} here.`
    throw new InputError(message, [{ code: 'ring-short', message }])
  }
  return { ring: [...ring, ring[0]!], order }
}

/**
 * One place as people write it: `51.5, −0.12`, `51°30′N 0°07′W`; longitude folded to at most 180°. Latitude comes first where no letter says
 * which is which. Throws InputError with the reason.
 */
export function parsePlace(text: string): Position {
  const read = readLine(text.trim(), 'lat-lon')
  if (typeof read === 'string') {
    throw new InputError(`${read.charAt(0).toUpperCase()}${read.slice(1)}`, [{ value: text.trim().slice(0, 60), code: 'coordinate', message: read }])
  }
  const [lon, lat] = read
  return [lon > 180 ? lon - 360 : lon < -180 ? lon + 360 : lon, lat]
}

/** What a first line like `latitude, longitude` says about the order; null where it is not a header. */
function orderOfHeader(line: string): CoordinateOrder | null {
  const words = line.toLowerCase().split(/[\s,;]+/).map(word => word.replace(/[^a-z]/g, ''))
  const lat = words.findIndex(word => /^(lat|latitude|y|breite)$/.test(word))
  const lon = words.findIndex(word => /^(lon|long|lng|longitude|x)$/.test(word))
  return lat < 0 || lon < 0 ? null : lat < lon ? 'lat-lon' : 'lon-lat'
}

function readLine(line: string, order: CoordinateOrder): Position | string {
  const pair = splitPair(line)
  if (!pair) return 'Two coordinates are wanted, like “51.5, −0.12” or “51°30′N 0°07′W”.'
  const axes = assign(pair, order)
  if (!axes) return 'Both coordinates carry a letter of the same kind.'
  const { lat, lon } = axes
  if (Math.abs(lat) > 90) {
    const swapped = Math.abs(lon) <= 90 && pair.every(angle => angle.axis === null)
    return `Latitude ${String(lat).replace('-', '\u2212')}° is outside −90° to 90°.${swapped ? ' Is the order longitude, latitude?' : ''}`
  }
  if (Math.abs(lon) > 360) return `Longitude ${String(lon).replace('-', '\u2212')}° is more than a whole turn.`
  return [lon, lat]
}

function assign([first, second]: [Angle, Angle], order: CoordinateOrder): { lat: number, lon: number } | null {
  if (first.axis !== null && first.axis === second.axis) return null
  const latFirst = first.axis === 'lat' || second.axis === 'lon' || (first.axis === null && second.axis === null && order === 'lat-lon')
  return latFirst ? { lat: first.degrees, lon: second.degrees } : { lat: second.degrees, lon: first.degrees }
}

/** Two angles on a line, by the first separator that leaves an angle on each side. */
function splitPair(line: string): [Angle, Angle] | null {
  const plain = line.replace(/^[([\s]+|[)\];,\s]+$/g, '')
  for (const separator of [/;/, /\t+/, /,\s+/, /,/, /(?<=[NSEW])\s*(?=[\d+.])/i, /(?<=[\d."'′″°\s])\s*(?=[NSEW]\s*\d)/i, /\s+(?=[-+−–]?\d)/]) {
    const parts = plain.split(separator)
    if (parts.length !== 2) continue
    const first = parseAngle(parts[0]!)
    const second = parseAngle(parts[1]!)
    if (first && second) return [first, second]
  }
  return splitBareSexagesimal(plain)
}

/** `51 30 00 0 7 12`: four or six bare numbers are degrees and minutes, or degrees, minutes and seconds, twice. */
function splitBareSexagesimal(line: string): [Angle, Angle] | null {
  const words = line.split(/[\s,]+/)
  if (words.length !== 4 && words.length !== 6) return null
  const first = parseAngle(words.slice(0, words.length / 2).join(' '))
  const second = parseAngle(words.slice(words.length / 2).join(' '))
  return first && second ? [first, second] : null
}
