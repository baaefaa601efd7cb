/** Bytes that are looked at to tell an encoding without a byte-order mark. */
const LOOKED_AT = 4096

/**
 * Text of a file: UTF-8; UTF-16 where a byte-order mark or a zero in every other byte says so; else, where the bytes are no UTF-8,
 * Windows-1252, in which older programs write ° and ±. Browser and server read a file the same way.
 */
export function decodeText(bytes: Uint8Array): string {
  const utf16 = utf16Of(bytes)
  if (utf16) return new TextDecoder(utf16).decode(bytes)
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes)
  } catch (error) {
    if (!(error instanceof TypeError)) throw error
    return new TextDecoder('windows-1252').decode(bytes)
  }
}

function utf16Of(bytes: Uint8Array): 'utf-16le' | 'utf-16be' | null {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return 'utf-16le'
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return 'utf-16be'
  const pairs = Math.min(bytes.length, LOOKED_AT) >> 1
  let even = 0
  let odd = 0
  for (let i = 0; i < pairs; i++) {
    if (bytes[2 * i] === 0) even++
    if (bytes[2 * i + 1] === 0) odd++
  }
  // Tables are digits and Latin letters for the most part: their high bytes are zero, and no other byte of them is.
  if (odd > 0.7 * pairs && even < 0.05 * pairs) return 'utf-16le'
  return even > 0.7 * pairs && odd < 0.05 * pairs ? 'utf-16be' : null
}
