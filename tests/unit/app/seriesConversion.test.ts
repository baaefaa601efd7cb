import { describe, expect, it } from 'vitest'
import { recipeOfChoice } from '#shared/series/conversionChoice'
import { readMassSeries } from '#shared/series/readMassSeries'
import { fieldOfIssue, fieldsOfDraft, firstFields, quantityInName, readConversion, unitInName, withMaterial, withQuantity, type ConversionFields } from '~/series/conversionFields'
import { columnsToSend, previewOf, type ColumnChoices, type Preview } from '~/series/preview'
import { readFigure } from '~/utils/figureInput'

const areaM2 = 2e9
const start = firstFields('mass (Gt)', 'Gt')
const head = (part: Partial<ConversionFields> = {}): ConversionFields => ({ ...withQuantity(start, 'head'), unit: 'm', storage: '0,1', storageSigma: '0.02', ...part })

function read(source: string | { cells: string[][] }, choices: ColumnChoices = {}, setting = {}): Preview {
  const preview = previewOf(source, choices, areaM2, setting)
  if (preview.state !== 'read') throw new Error(preview.message)
  return preview
}

describe('fields of a conversion', () => {
  it.each([
    ['storage (acre-feet)', 'acre-feet', 'volume'], ['head_m', 'm', 'head'], ['dh (m)', 'm', 'ice-thickness'], ['balance [m w.e./yr]', 'm w.e./yr', 'specific-balance'],
    ['rate (Gt/yr)', 'Gt/yr', 'mass-rate'], ['mass (Gt)', 'Gt', null], ['anomaly', '', null],
  ] as const)('begin with what “%s” says', (name, unit, quantity) => {
    expect(unitInName(name)).toBe(unit)
    expect(quantityInName(name)).toBe(quantity)
  })

  it('give the choice, with decimal comma', () => {
    expect(readConversion(head(), readFigure)).toEqual({
      faults: {}, choice: { quantity: 'head', unit: 'm', storage: { coefficient: 'specific-yield', value: 0.1, sigma: 0.02, source: null } },
    })
  })

  it('take a stored series off, and the preview tells which epochs it does not reach', () => {
    const fields: ConversionFields = { ...start, subtract: [{ on: true, what: 'snow', versionId: 'v', maxGapDays: '40' }, { on: true, what: 'snow', versionId: '', maxGapDays: '40' }, { on: true, what: 'snow', versionId: 'v', maxGapDays: 'x' }] }
    expect(Object.keys(readConversion(fields, readFigure).faults)).toEqual(['subtract/1', 'subtract/2'])
    const { choice } = readConversion({ ...fields, subtract: fields.subtract.slice(0, 1) }, readFigure)
    expect(() => recipeOfChoice(choice!, areaM2)).toThrow(expect.objectContaining({ issues: [expect.objectContaining({ path: 'subtract/0' })] }))
    // MJD 55197 is 1 January 2010 (IERS).
    const recipe = recipeOfChoice(choice!, areaM2, false, [{ versionId: 'v', dataSha256: 'a', name: 'Snow field, version 2', series: { mjd: [55197, 55228], massGt: [0, 31], sigmaGt: null, sharedRates: [] } }])
    expect(recipe.steps.at(-1)).toMatchObject({ kind: 'subtract-series', of: { versionId: 'v', dataSha256: 'a' } })
    const preview = read('date,mass (Gt)\n2009-12-01,100\n2010-01-01,100\n2010-01-11,100\n2010-03-01,100\n', {}, { recipe })
    expect([...preview.massGt]).toEqual([100, 90])
    expect(preview.head.map(row => row.row)).toEqual([3, 4])
    expect(preview.notices.find(n => n.code === 'not-covered')!.message).toMatch(/2 epochs are left out/)
    expect(fieldOfIssue('subtract/3')).toBe('subtract/3')
    expect(fieldsOfDraft(JSON.parse(JSON.stringify(fields)))!.subtract).toHaveLength(3)
  })

  it('say field by field what is missing or no number', () => {
    const { choice, faults } = readConversion(head({ unit: ' ', storage: '', storageSigma: 'x', areaSigma: '-1' }), readFigure)
    expect(choice).toBeNull()
    expect(Object.keys(faults).sort()).toEqual(['areaSigma', 'storage', 'storageSigma', 'unit'])
    expect(faults.unit).toMatch(/m, cm, ft/)
  })

  it('take density, error and its shared source from the material, and none from an own value', () => {
    const ice = withMaterial(withQuantity(start, 'ice-thickness'), 'glacier')
    // Huss (2013): 850 ± 60 kg/m³.
    expect(ice).toMatchObject({ density: '850', densitySigma: '60', densitySource: 'density of glacier volume change' })
    expect(withMaterial(ice, 'own')).toMatchObject({ density: '850', densitySource: '' })
    expect(withQuantity({ ...start, material: 'water' }, 'ice-thickness').material).toBe('glacier')
  })

  it('hold rates to be taken off, with their own error or one that others share', () => {
    const corrections = [{ on: true, what: 'isostatic' as const, name: ' Model A ', rate: '−1,5', sigma: '0.4', shared: true }]
    expect(readConversion({ ...start, corrections }, readFigure).choice?.corrections).toEqual([{ on: true, what: 'isostatic', name: 'Model A', gtPerYear: { value: -1.5, sigma: 0.4, source: 'Model A' } }])
    const bad = [['', '1', '1'], ['A', '', '1'], ['A', '1', 'x'], ['A', '1', '-1']].map(([name, rate, sigma]) => ({ ...corrections[0]!, name: name!, rate: rate!, sigma: sigma! }))
    expect(Object.keys(readConversion({ ...start, corrections: bad }, readFigure).faults)).toEqual(['corrections/0', 'corrections/1', 'corrections/2', 'corrections/3'])
  })

  it('come back from a draft, or not at all', () => {
    expect(fieldsOfDraft(JSON.parse(JSON.stringify(head())))).toEqual(head())
    for (const bad of [null, 1, {}, { quantity: 'heat' }, { ...head(), storage: 3 }]) expect(fieldsOfDraft(bad)).toBeNull()
  })

  it('are found by the path of an issue', () => {
    expect(['unit', 'density/value', 'density/sigma', 'storage', 'area/sigma'].map(fieldOfIssue)).toEqual(['unit', 'density', 'densitySigma', 'storage', 'areaSigma'])
  })
})

describe('a preview with a conversion', () => {
  const choice = readConversion(head(), readFigure).choice!
  const text = 'date,head (m)\n2010-01-15,0\n2010-02-15,-1\n2010-03-15,2\n'

  it('turns heads into gigatonnes over the area, and the server reads the same', () => {
    const recipe = recipeOfChoice(choice, areaM2)
    const preview = read(text, {}, { recipe })
    // 1 m of head × 0.1 over 2000 km² is 0.2 km³ of water.
    expect(preview.massGt[1]).toBeCloseTo(-0.2, 12)
    expect(preview.stepsDone.map(step => step.kind)).toEqual(['unit', 'storage', 'area'])
    const again = readMassSeries(text, { ...columnsToSend(preview), areaM2, recipe } as Parameters<typeof readMassSeries>[1])
    expect(again.massGt).toEqual([...preview.massGt])
  })

  it('takes a rate off and keeps a step that is switched off', () => {
    const correction = { on: true, what: 'isostatic' as const, name: 'Model A', gtPerYear: { value: 2, sigma: 0.5, source: null } }
    const years = 'date,mass\n2010-01-01,0\n2011-01-01,0\n2012-01-01,0\n2014-01-01,0\n'
    const trendOf = (on: boolean) => read(years, {}, { recipe: recipeOfChoice({ quantity: 'mass', unit: 'Gt', corrections: [{ ...correction, on }] }, areaM2) })
    expect(trendOf(true).trend!.value).toBeCloseTo(-2, 9)
    expect(trendOf(false).trend!.value).toBeCloseTo(0, 12)
    expect(trendOf(false).steps.at(-1)).toMatch(/^Switched off/)
  })

  it('refuses a unit of another dimension by name', () => {
    expect(() => recipeOfChoice({ ...choice, unit: 'km³' }, areaM2)).toThrow(/is a volume, but groundwater head change/)
  })

  it('sums rates over periods, each row’s sum at its end', () => {
    const rate = recipeOfChoice({ quantity: 'mass-rate', unit: 'Gt/yr' }, areaM2)
    const preview = read('from,to,rate\n2010-01-01,2011-01-01,-3\n2011-01-01,2012-01-01,5\n', {}, { recipe: rate })
    const sums = [0, -3, 2]
    expect(preview.massGt).toHaveLength(3)
    preview.massGt.forEach((mass, i) => expect(mass).toBeCloseTo(sums[i]!, 12))
    // MJD 55562 is 1 January 2011 (IERS).
    expect(preview.head[0]!.mjd).toBe(55562)
    expect(preview.head[0]!.massGt).toBeCloseTo(-3, 12)
    expect(columnsToSend(preview)).toMatchObject({ epochColumn: 0, endColumn: 1 })
  })

  it('keeps the columns in sight where rates have no periods', () => {
    const rate = recipeOfChoice({ quantity: 'mass-rate', unit: 'Gt/yr' }, areaM2)
    const preview = previewOf('date,rate\n2010-01-15,-3\n2010-02-15,5\n', {}, areaM2, { recipe: rate })
    expect(preview).toMatchObject({ state: 'refused', issues: [{ code: 'periods-missing' }], chosen: { epochColumn: 0, valueColumn: 1 } })
  })
})

describe('a table with a column for each region', () => {
  const wide = 'date,North,North sigma,South Plain,South Plain sigma\n2010-01-15,1,0.1,10,1\n2010-02-15,2,0.2,20,2\n2010-03-15,3,0.3,30,3\n'

  it('gives the region its own column and that column’s one-sigma', () => {
    const preview = read(wide, {}, { regionName: 'South plain' })
    expect([...preview.massGt]).toEqual([10, 20, 30])
    expect([...preview.sigmaGt!]).toEqual([1, 2, 3])
    expect(preview.sideBySide).toEqual(['North', 'South Plain'])
  })

  it('never takes another column’s one-sigma', () => {
    expect([...read(wide, { valueColumn: 3 }).sigmaGt!]).toEqual([1, 2, 3])
    const without = 'date,North,North sigma,South\n2010-01-15,1,0.1,10\n2010-02-15,2,0.2,20\n2010-03-15,3,0.3,30\n'
    expect(read(without, { valueColumn: 3 }).sigmaGt).toBeNull()
  })

  it('is read from a sheet as from a text', () => {
    const cells = wide.trim().split('\n').map(line => line.split(','))
    expect([...read({ cells }, {}, { regionName: 'North' }).massGt]).toEqual([1, 2, 3])
  })
})
