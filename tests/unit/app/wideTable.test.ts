import { describe, expect, it } from 'vitest'
import { namesOfColumns, regionColumns } from '~/series/wide'
import { widePreviewOf } from '~/series/widePreview'

const text = 'date,Basin North (Gt),Basin North sigma,Basin,Elsewhere\n2004-01-15,1,0.5,10,7\n2004-02-15,2,0.5,20,8\n2004-03-15,3,0.5,x,9\n'
const regions = [{ id: 'b', name: 'Basin' }, { id: 'n', name: 'Basin north' }, { id: 'z', name: 'Zone' }]

describe('a table with a column for each region', () => {
  it('is matched by name: the longest that fits, no region twice', () => {
    expect(regionColumns(text, regions)).toEqual([
      { valueColumn: 1, sigmaColumn: 2, name: 'Basin North (Gt)', regionId: 'n' },
      { valueColumn: 3, sigmaColumn: null, name: 'Basin', regionId: 'b' },
      { valueColumn: 4, sigmaColumn: null, name: 'Elsewhere', regionId: null },
    ])
    expect(namesOfColumns(text)).toEqual(['date', 'Basin North (Gt)', 'Basin North sigma', 'Basin', 'Elsewhere'])
    expect(regionColumns('no table at all', regions)).toEqual([])
  })

  it('is read column by column, each with its own bad rows', () => {
    const series = [{ regionId: 'n', valueColumn: 1, sigmaColumn: 2, areaM2: 1e10 }, { regionId: 'b', valueColumn: 3, sigmaColumn: null, areaM2: 1e10 }]
    const { rows, issues, badRows } = widePreviewOf({ source: text, series, withdrawalPositive: false })
    expect(rows.map(({ regionId, count, bad }) => [regionId, count, bad])).toEqual([['n', 3, 0], ['b', 2, 1]])
    expect([badRows, issues[0]]).toEqual([1, expect.objectContaining({ row: 4, column: 'Basin', code: 'not-a-number' })])
    // MJD 53019 and 53079 are 15 January and 15 March 2004 (53005 is 1 January): 2 Gt in 60 days.
    expect(rows[0]!.trend!.value).toBeCloseTo(2 / 60 * 365.25, 1)
    expect(widePreviewOf({ source: '', series, withdrawalPositive: false }).fault).toBeTruthy()
  })
})
