import { describe, expect, it } from 'vitest'
import { nearestIndex, readoutAt, stepped, zoomed } from '../../../shared/figures/series/readout.ts'
import type { FigureSeries, SeriesData } from '../../../shared/figures/series/data.ts'

const monthly: FigureSeries = { label: 'model', role: 'model', mjd: [53019.5, 53050, 53080.5, 53111], value: [1, null, 3, 4], sigma: [0.1, null, 0.1, 0.1] }
const daily: FigureSeries = { label: 'observed', role: 'observed', mjd: Array.from({ length: 60 }, (_, i) => 53010 + i), value: Array.from({ length: 60 }, (_, i) => i) }
const panel = (...series: FigureSeries[]): SeriesData => ({ title: '', unit: 'ms', series })
const plain = (text: string) => text.replace(/[\u00a0\u202f]/g, ' ')

describe('readout', () => {
  it('finds the nearest epoch that has a value', () => {
    expect([0, 53040, 53051, 53100, 9e9].map(time => nearestIndex(monthly, time))).toEqual([0, 0, 2, 3, 3])
    expect(nearestIndex({ ...monthly, value: [null, null, null, null] }, 53000)).toBe(-1)
  })
  it('reads all series at one epoch, with errors where they are known', () => {
    const readout = readoutAt([panel(monthly, daily)], 53020.2, [[0, 60]])!
    expect(readout).toMatchObject({ mjd: 53020, date: '2004-01-16' })
    expect(readout.lines.map(({ text }) => plain(text))).toEqual(['+1.00 ± 0.10 ms', '+10.0 ms'])
    expect(readoutAt([panel(monthly)], 53111)!.date).toBe('April 2004')
    expect(readoutAt([panel(monthly, daily)], 53111)!.lines.map(({ label }) => label)).toEqual(['model'])
    expect(readoutAt([panel()], 53000)).toBeNull()
  })
  it('steps from value to value and stops at the ends', () => {
    expect(stepped([panel(monthly, daily)], 53020.2, 3)).toBe(53023)
    expect(stepped([panel(daily)], 53020, -100)).toBe(53010)
    expect(stepped([panel(daily)], 53020, 1000)).toBe(53069)
    expect(stepped([panel()], 5, 1)).toBe(5)
  })
})

describe('zoomed', () => {
  const whole = { fromMjd: 0, toMjd: 1000 }
  it('narrows about a time and keeps it in its place', () => {
    expect(zoomed(whole, whole, 250, 0.5)).toEqual({ fromMjd: 125, toMjd: 625 })
  })
  it('stays inside and gives null for the whole', () => {
    expect(zoomed({ fromMjd: 0, toMjd: 100 }, whole, 90, 2)).toEqual({ fromMjd: 0, toMjd: 200 })
    expect(zoomed({ fromMjd: 0, toMjd: 600 }, whole, 300, 2)).toBeNull()
    expect(zoomed({ fromMjd: 10, toMjd: 14 }, whole, 12, 0.01)).toEqual({ fromMjd: 10.5, toMjd: 13.5 })
  })
})
