/** A figure with what must stand unseen before and after it, so that decimal signs of a right-aligned column meet. */
export interface AlignedText { text: string, before: string, after: string }

const decimalsOf = (text: string) => /\d/.test(text) ? text.match(/\.\d+/)?.[0] ?? '' : ''

/** Fills figures of a column up to its longest decimals, and to equal length before them. */
export function aligned(texts: readonly string[]): AlignedText[] {
  const longest = texts.reduce((most, text) => decimalsOf(text).length > most.length ? decimalsOf(text) : most, '')
  const bodies = texts.map(text => text.slice(0, text.length - decimalsOf(text).length))
  const head = bodies.reduce((most, body) => body.length > most.length ? body : most, '')
  return texts.map((text, i) => ({
    text,
    before: head.slice(0, head.length - bodies[i]!.length).replace(/\d/g, '0'),
    after: longest.slice(decimalsOf(text).length).replace(/\d/g, '0'),
  }))
}
