import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { findJsonFault } from '../../../shared/geo/jsonFault.ts'

const parses = (text: string): boolean => {
  try {
    JSON.parse(text)
    return true
  }
  catch {
    return false
  }
}

describe('findJsonFault', () => {
  it('finds none in JSON', () => {
    fc.assert(fc.property(fc.json(), text => findJsonFault(text) === null), { numRuns: 500, seed: 1 })
    fc.assert(fc.property(fc.jsonValue(), value => findJsonFault(JSON.stringify(value, null, 2)) === null), { numRuns: 200, seed: 2 })
  })

  it('finds one exactly where JSON.parse does, in JSON with a character changed, dropped or added', () => {
    fc.assert(fc.property(fc.json(), fc.nat(), fc.constantFrom('', ',', '}', ']', '[', '"', 'x', '0', '\n', '\\', ':', '-'), fc.nat(1), (text, place, sign, drop) => {
      const k = place % (text.length + 1)
      const changed = text.slice(0, k) + sign + text.slice(k + drop)
      expect(findJsonFault(changed) === null, changed).toBe(parses(changed))
    }), { numRuns: 3000, seed: 3 })
  })

  it('does not mind deep nesting', () => {
    expect(findJsonFault('['.repeat(100_000))).toEqual({ line: 1, column: 100_001, found: 'the end of the text' })
  })
})
