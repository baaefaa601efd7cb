import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { plainFault } from '../../../server/utils/plainFaults'

/** What is said of a value that a schema refuses. */
const said = (schema: z.ZodType, value: unknown) => schema.safeParse(value, { error: plainFault }).error!.issues[0]!.message

describe('what does not hold is said in plain words', () => {
  it.each<[string, z.ZodType, unknown, string]>([
    ['a long name', z.string().max(120), 'x'.repeat(121), 'must have at most 120 characters'],
    ['an empty name', z.string().min(1), '', 'must not be empty'],
    ['a short word', z.string().min(3), 'ab', 'must have at least 3 characters'],
    ['nothing at all', z.string(), undefined, 'is missing'],
    ['another type', z.number(), 'seven', 'must be a number'],
    ['a large number', z.number().max(366), 400, 'must be at most 366'],
    ['a number at an open end', z.number().gt(0), 0, 'must be more than 0'],
    ['an address', z.email(), 'nobody', 'must be an e-mail address'],
    ['a word of a list', z.enum(['day', 'pole']), 'sea', 'must be one of day, pole'],
    ['a list', z.array(z.int()).max(1), [1, 2], 'must have at most 1 entry'],
  ])('%s', (_, schema, value, text) => expect(said(schema, value)).toBe(text))

  it('leaves a schema its own words', () => {
    expect(said(z.string().min(10, 'must have at least 10 characters; a sentence is easier'), 'short')).toBe('must have at least 10 characters; a sentence is easier')
  })
})
