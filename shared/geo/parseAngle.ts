/** An angle as people write it: decimal degrees or degrees, minutes, seconds, with or without a hemisphere letter. */
export interface Angle {
  /** Signed: north and east positive. */
  degrees: number
  /** Which coordinate the letter names; null without a letter. */
  axis: 'lat' | 'lon' | null
}

const number = String.raw`\d+(?:\.\d*)?|\.\d+`
const pattern = new RegExp(
  String.raw`^([NSEW])?\s*([+-])?\s*(${number})\s*(?:[°ºd:\s]\s*(?:(${number})\s*(?:['m:\s]\s*(?:(${number})\s*(?:''|["s])?)?)?)?)?\s*([NSEW])?$`, 'i'
)

/** Null where the text is not an angle. Minutes and seconds of 60 or more, and fractions before the last part, are refused. */
export function parseAngle(text: string): Angle | null {
  const plain = text.trim()
    .replace(/[\u2212\u2013]/g, '-')
    .replace(/[\u2032\u2019\u00B4`]/g, '\'')
    .replace(/[\u2033\u201D\u201C]/g, '"')
    .replace(/,(?=\d)/g, '.')
  const match = pattern.exec(plain)
  if (!match) return null
  const [, before, sign, degrees, minutes, seconds, after] = match
  if (before && after) return null
  const letter = (before ?? after)?.toUpperCase()
  if (letter && sign) return null
  if (Number(minutes ?? 0) >= 60 || Number(seconds ?? 0) >= 60) return null
  if ((minutes && degrees!.includes('.')) || (seconds && minutes!.includes('.'))) return null
  const size = Number(degrees) + Number(minutes ?? 0) / 60 + Number(seconds ?? 0) / 3600
  const negative = sign === '-' || letter === 'S' || letter === 'W'
  const axis = letter ? (letter === 'N' || letter === 'S' ? 'lat' : 'lon') : null
  return { degrees: negative ? -size : size, axis }
}
