import { describe, expect, it } from 'vitest'
import {
  formatArea, formatBytes, formatDate, formatDirection, formatInstant, formatLatitude, formatLongDate, formatLongitude, formatMeasured,
  formatMonth, formatNumber, formatPosition, formatScientific, formatShare, formatSigned, formatSignificant, formatSpan,
} from '../../../shared/format/numbers.ts'

const thin = '\u202f'
const hard = '\u00a0'

describe('formatNumber', () => {
  it.each([
    [-214, 0, '\u2212214'], [1234.5, 1, '1234.5'], [12345.678, 2, `12${thin}345.68`], [1712400, 0, `1${thin}712${thin}400`],
    [-0.001, 2, '0.00'], [-0, 0, '0'], [null, 1, '–'], [undefined, 1, '–'], [Number.NaN, 1, '–'], [Number.POSITIVE_INFINITY, 0, '–'],
    [9999.9, 0, `10${thin}000`], [3.629e24, 1, `3.63${thin}×${thin}10²⁴`],
  ])('writes %s with %i decimals', (value, digits, text) => {
    expect(formatNumber(value, digits)).toBe(text)
  })
  it('never writes a hyphen for minus', () => {
    for (const value of [-1, -1e-7, -123456.7, -1e25]) expect(formatNumber(value, 9)).not.toContain('-')
  })
})

describe('formatSigned', () => {
  it.each([[5.15, 2, '+5.15'], [-0.07, 2, '\u22120.07'], [0, 1, '0.0'], [0.004, 2, '0.00']])('writes %s', (value, digits, text) => {
    expect(formatSigned(value, digits)).toBe(text)
  })
})

describe('formatMeasured', () => {
  it.each([
    [5.15, 0.36, '+5.15', '0.36'], [-214.4, 12.3, '\u2212214', '12'], [9.63, 0.8, '+9.63', '0.80'], [0.0123, 0.0996, '+0.01', '0.10'],
    [1234.6, 123, '+1235', '123'], [-0.0712, 0.0107, '\u22120.071', '0.011'], [0, 0.36, '0.00', '0.36'],
  ])('chooses digits of %s ± %s from the sigma', (value, sigma, shown, error) => {
    expect(formatMeasured(value, sigma)).toEqual({ value: shown, sigma: `±${hard}${error}`, text: `${shown}${hard}±${hard}${error}` })
  })
  it('gives value and sigma the same decimals, whatever the scale', () => {
    for (let exponent = -4; exponent < 6; exponent++) {
      for (const mantissa of [1, 1.23, 9.94, 9.96, 0.996]) {
        const { value, sigma } = formatMeasured(7.3 * 10 ** exponent, mantissa * 10 ** exponent)
        const places = (text: string) => text.split('.')[1]?.length ?? 0
        expect(places(value)).toBe(places(sigma))
      }
    }
  })
  it('gives a bound where the sigma is finer than the digits that are deserved', () => {
    expect(formatMeasured(123.456789, 0.00002).text).toBe(`+123.46${hard}±${hard}<${thin}0.01`)
  })
  it('leaves the error out where there is none', () => {
    expect(formatMeasured(5.1543, null, { unit: 'µs' })).toEqual({ value: '+5.15', sigma: '', text: `+5.15${hard}µs` })
    expect(formatMeasured(5.1543, 0).sigma).toBe('')
    expect(formatMeasured(null, 3).text).toBe('–')
  })
  it('can go without a plus sign', () => {
    expect(formatMeasured(6.21, 0.5, { signed: false }).text).toBe(`6.21${hard}±${hard}0.50`)
  })
})

describe('other figures', () => {
  it('keeps significant digits', () => {
    expect(formatSignificant(0.001234)).toBe('0.00123')
    expect(formatSignificant(1234)).toBe('1234')
    expect(formatSignificant(0)).toBe('0')
  })
  it('writes powers of ten', () => {
    expect(formatScientific(-3.7e-11)).toBe(`\u22123.7${thin}×${thin}10⁻¹¹`)
    expect(formatScientific(0)).toBe('0')
  })
  it('writes shares, areas and sizes', () => {
    expect(formatShare(0.534)).toBe(`+53${hard}%`)
    expect(formatShare(-0.012, 1)).toBe(`\u22121.2${hard}%`)
    expect(formatShare(null)).toBe('–')
    expect(formatArea(1712437)).toBe(`1${thin}712${thin}000${hard}km²`)
    expect(formatArea(54.321)).toBe(`54.32${hard}km²`)
    expect(formatBytes(999)).toBe(`999${hard}B`)
    expect(formatBytes(12345)).toBe(`12${hard}kB`)
    expect(formatBytes(3_400_000)).toBe(`3.4${hard}MB`)
  })
})

describe('places', () => {
  it.each([
    [-35, 0, `35°${hard}W`], [64.16, 1, `64.2°${hard}E`], [0, 0, '0°'], [-0.2, 0, '0°'], [180, 0, '180°'], [-179.8, 0, '180°'],
    [181, 0, `179°${hard}W`], [-190, 0, `170°${hard}E`], [540, 0, '180°'],
  ])('writes longitude %s', (degrees, digits, text) => {
    expect(formatLongitude(degrees, digits)).toBe(text)
  })
  it('writes latitude and position', () => {
    expect(formatLatitude(-76.04, 1)).toBe(`76.0°${hard}S`)
    expect(formatLatitude(0)).toBe('0°')
    expect(formatPosition([-41.2, 73.9])).toBe(`73.9°${hard}N 41.2°${hard}W`)
  })
  it('writes a direction with its error', () => {
    expect(formatDirection({ value: -30.2, sigma: 4.6 })).toBe(`30°${hard}±${hard}5°${hard}W`)
    expect(formatDirection({ value: 64.16, sigma: 0.43 })).toBe(`64.2°${hard}±${hard}0.4°${hard}E`)
    expect(formatDirection({ value: 179.9, sigma: 4 })).toBe(`180°${hard}±${hard}4°`)
    expect(formatDirection({ value: -36.52, sigma: 0.004 })).toBe(`36.5°${hard}W`)
    expect(formatDirection({ value: 10, sigma: null })).toBe(`10°${hard}E`)
    expect(formatDirection({ value: 10, sigma: 95 })).toBe('no settled direction')
    expect(formatDirection(null)).toBe('no direction')
  })
})

describe('dates', () => {
  // MJD 53005 is 1 January 2004 and MJD 37665 is 1 January 1962, the first line of the IERS EOP 14 C04 file.
  it('reads MJD as UTC dates', () => {
    expect(formatDate(37665)).toBe('1962-01-01')
    expect(formatDate(53005.9)).toBe('2004-01-01')
    expect(formatLongDate(53005)).toBe(`1${hard}January 2004`)
    expect(formatMonth(60310)).toBe('January 2024')
    expect(formatDate(Number.NaN)).toBe('–')
    expect(formatDate(1e12)).toBe('–')
  })
  it('names spans', () => {
    expect(formatSpan(53005, 60675)).toBe('2004–2024')
    expect(formatSpan(53005, 60310)).toBe('2004–2023')
    expect(formatSpan(53020.5, 53400)).toBe('January 2004 – January 2005')
    expect(formatSpan(53020.5, 53100.5)).toBe('January–April 2004')
    expect(formatSpan(53005, 53005)).toBe('January 2004')
  })
  it('writes instants in UTC', () => {
    expect(formatInstant('2026-03-16T14:05:00+02:00')).toBe(`16${hard}March 2026, 12:05 UTC`)
    expect(formatInstant('yesterday')).toBe('–')
  })
})
