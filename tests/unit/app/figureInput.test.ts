import { describe, expect, it } from 'vitest'
import { readFigure, readPair, writeFigure } from '../../../app/utils/figureInput'

describe('readFigure', () => {
  it.each([['2.3', 2.3], ['+2.3', 2.3], ['−0,80', -0.8], ['-0.8', -0.8], ['1 200', 1200], ['1\u202f200.5', 1200.5], ['.5', 0.5], ['1e-3', 0.001]])('reads %s', (text, value) => {
    expect(readFigure(text)).toBe(value)
  })
  it.each(['1,2,3', '2.3 ms', 'abc', '1.2.3', '--1', 'Infinity', '0x10'])('refuses %s', (text) => {
    expect(readFigure(text)).toBeNaN()
  })
  it('takes an empty field for none', () => {
    expect(readFigure('  ')).toBeNull()
  })
  it('reads back what it writes', () => {
    for (const value of [-0.8, 2.3, 0, 1e-7, -1234.5678]) expect(readFigure(writeFigure(value))).toBe(value)
  })
})

describe('readPair', () => {
  it('gives both or neither', () => {
    expect(readPair('−0.8', '0.1')).toEqual({ pair: { value: -0.8, sigma: 0.1 }, fault: null })
    expect(readPair('', '')).toEqual({ pair: null, fault: null })
  })
  it.each([['', '0.1', /value is missing/], ['2', '', /one-sigma is missing/], ['x', '1', /“x”/], ['1', 'y', /“y”/], ['1', '−1', /negative/]])('says what is wrong with %s ± %s', (value, sigma, said) => {
    const reading = readPair(value, sigma)
    expect(reading.pair).toBeNull()
    expect(reading.fault).toMatch(said)
  })
})
