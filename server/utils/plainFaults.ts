import type { z } from 'zod'

const things: Readonly<Record<string, string>> = {
  string: 'a text', number: 'a number', int: 'a whole number', boolean: 'true or false', array: 'a list', object: 'an object', record: 'an object', date: 'a date', null: 'null',
}
const formats: Readonly<Record<string, string>> = { email: 'an e-mail address', url: 'an address of the web', datetime: 'a date with its time', date: 'a date' }

/** What counts, by what is counted: characters of a text, entries of a list; a number counts itself. */
function size(origin: string, n: number | bigint): string {
  const units: Readonly<Record<string, [string, string]>> = { string: ['character', 'characters'], array: ['entry', 'entries'], set: ['entry', 'entries'] }
  const unit = units[origin]
  return unit ? `${n} ${Number(n) === 1 ? unit[0] : unit[1]}` : String(n)
}

/**
 * What does not hold, in words for the person who typed it; a schema's own words go before these. The value itself is not repeated.
 * Undefined where the library's words must do.
 */
export function plainFault(issue: z.core.$ZodRawIssue): string | undefined {
  switch (issue.code) {
    case 'invalid_type':
      return issue.input === undefined ? 'is missing' : Number.isNaN(issue.input) ? 'is not a number' : `must be ${things[issue.expected] ?? issue.expected}`
    case 'too_big':
      return issue.origin === 'string' || issue.origin === 'array' ? `must have at most ${size(issue.origin, issue.maximum)}` : `must be ${issue.inclusive === false ? 'less than' : 'at most'} ${issue.maximum}`
    case 'too_small':
      if ((issue.origin === 'string' || issue.origin === 'array') && Number(issue.minimum) === 1) return 'must not be empty'
      return issue.origin === 'string' || issue.origin === 'array' ? `must have at least ${size(issue.origin, issue.minimum)}` : `must be ${issue.inclusive === false ? 'more than' : 'at least'} ${issue.minimum}`
    case 'invalid_format': {
      const thing = formats[issue.format]
      return thing ? `must be ${thing}` : undefined
    }
    case 'invalid_value':
      return issue.values.length === 1 ? `must be ${String(issue.values[0])}` : `must be one of ${issue.values.map(String).join(', ')}`
    case 'not_multiple_of': return `must be a multiple of ${issue.divisor}`
    default: return undefined
  }
}
