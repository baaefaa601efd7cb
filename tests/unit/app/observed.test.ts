import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { tableHead, withColumn } from '../../../app/observed/csvChoice'
import { observedPanels, observedRange } from '../../../app/observed/panels'
import { columnsOf, isUseful, readObservedText } from '../../../app/observed/reading'
import { observedSentence, stillInside } from '../../../app/observed/texts'

/** A cut of EOP 14 C04 and of finals2000A, IERS; see tests/fixtures/README.md. */
const fixture = (name: string) => readFileSync(new URL(`../../fixtures/${name}`, import.meta.url), 'utf8')

const none = { sigmaLodMs: [], sigmaXMas: [], sigmaYMas: [] }
const data = { ...none, mjd: [1, 2, 3, 4, 20], lodMs: [1, -2, null, 3, 9], xMas: [null, null, null, null, null], yMas: [null, null, null, null, null], predicted: [0, 0, 0, 0, 1] }

describe('panels of an observed series', () => {
  it('draw what it holds, predictions apart, gaps open', () => {
    const panels = observedPanels(data)
    expect(panels.map(panel => panel.unit)).toEqual(['ΔLOD, ms'])
    expect(panels[0]!.series.map(series => series.label)).toEqual(['observed', 'predicted, not used'])
    expect(panels[0]!.series[0]!.value).toEqual([1, -2, null, 3, null])
    expect(panels[0]!.series[1]!.value).toEqual([null, null, null, null, 9])
    expect(panels[0]!.series[0]!.maxGapDays).toBe(2.5)
  })
  it('have one line where nothing is predicted', () => {
    expect(observedPanels({ ...data, predicted: [0, 0, 0, 0, 0] })[0]!.series).toHaveLength(1)
  })
})

describe('range of an observed series', () => {
  it('leaves predictions out', () => {
    expect(observedRange(data, 'lodMs')).toEqual({ low: -2, high: 3, fromMjd: 1, toMjd: 4 })
    expect(observedRange(data, 'xMas')).toBeNull()
  })
})

describe('reading before sending', () => {
  it('recognises IERS files by what stands in them', () => {
    const c04 = readObservedText(fixture('eop14c04_cut.txt'), null)
    expect(c04.parsed?.format).toBe('eop14c04')
    expect(isUseful(c04.parsed!)).toBe(true)
    expect(observedPanels(columnsOf(c04.parsed!)).map(panel => panel.unit)).toEqual(['ΔLOD, ms', 'x, mas', 'y, mas'])
    expect(readObservedText(fixture('finals2000A_excerpt.txt'), null).parsed?.format).toBe('finals2000a')
  })
  it('gives reasons for a text that is no series', () => {
    const reading = readObservedText('a,b\nx,y\n', null)
    expect(reading.parsed).toBeNull()
    expect(reading.fault!.issues.length).toBeGreaterThan(0)
  })
  it('takes the columns that were chosen', () => {
    const text = 'day,first,second\n53005,1.5,2.5\n53006,1.6,2.6\n'
    const head = tableHead(text)!
    expect(head.columns).toEqual(['day', 'first', 'second'])
    expect(head.recognised).toEqual({})
    const choice = withColumn({ epochColumn: 0, epochFormat: 'mjd', lodUnit: 'ms' }, 'lodMs', 2)
    const { parsed } = readObservedText(text, choice)
    expect([...parsed!.lodMs]).toEqual([2.5, 2.6])
    expect(withColumn(choice, 'lodMs', null).columns).toEqual({})
  })
  it('knows a pole of one component for useless', () => {
    const { parsed } = readObservedText('mjd,x_mas\n53005,1.5\n53006,1.6\n', null)
    expect(isUseful(parsed!)).toBe(false)
  })
})

describe('texts', () => {
  it('say what a series holds and what is still inside', () => {
    const latest = { count: 22248, firstMjd: 37665, lastMjd: 59912 }
    expect(observedSentence({ name: 'S', has: { lod: true, pole: true }, latest })).toBe('S holds the excess length of day and the pole at 22\u202f248 epochs, 1\u00a0January 1962 to 29\u00a0November 2022.')
    expect(stillInside({ lod: true, pole: false }).join()).toMatch(/18\.6-year.*core/)
    expect(stillInside({ lod: false, pole: true }).join()).not.toMatch(/zonal/)
  })
})
