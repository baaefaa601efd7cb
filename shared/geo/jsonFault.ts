/** The first place where a text stops being JSON (RFC 8259): 1-based line and column, and what stands there. */
export interface JsonFault { line: number, column: number, found: string }

const plain = /-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?|true|false|null/y
const quoted = /"(?:[^"\\]|\\(?:["\\/bfnrt]|u[0-9a-fA-F]{4}))*"/y
const space = /[ \t\n\r]*/y

/** Null where the text is JSON. Browsers and Node word `JSON.parse` errors differently, often without a place; this is the same everywhere. */
export function findJsonFault(source: string): JsonFault | null {
  const at = faultOffset(source)
  if (at === null) return null
  const before = source.slice(0, at)
  const line = before.split('\n').length
  const column = at - (before.lastIndexOf('\n') + 1) + 1
  const found = at >= source.length ? 'the end of the text' : `“${source.slice(at, at + 12).split('\n')[0]}”`
  return { line, column, found }
}

function faultOffset(source: string): number | null {
  let at = 0
  const match = (pattern: RegExp): boolean => {
    pattern.lastIndex = at
    if (!pattern.test(source)) return false
    at = pattern.lastIndex
    return true
  }
  /** A string; line ends, tabs and other control characters must be escaped in one. */
  const text = (): boolean => {
    const start = at
    if (!match(quoted)) return false
    for (let k = start; k < at; k++) {
      if (source.charCodeAt(k) < 32) {
        at = k
        return false
      }
    }
    return true
  }
  const sign = (character: string): boolean => {
    match(space)
    if (source[at] !== character) return false
    at++
    return true
  }
  const key = (): boolean => {
    match(space)
    return text() && sign(':')
  }
  // The open brackets; a loop and not recursion, so that deep nesting cannot exhaust the stack.
  const open: string[] = []
  for (;;) {
    match(space)
    if (sign('[')) {
      if (!sign(']')) {
        open.push(']')
        continue
      }
    }
    else if (sign('{')) {
      if (!sign('}')) {
        open.push('}')
        if (!key()) return at
        continue
      }
    }
    else if (!match(plain) && !text()) {
      return at
    }
    while (open.length > 0 && sign(open.at(-1)!)) open.pop()
    match(space)
    if (open.length === 0) return at < source.length ? at : null
    if (!sign(',')) return at
    if (open.at(-1) === '}' && !key()) return at
  }
}
