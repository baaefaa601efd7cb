import { describe, expect, it } from 'vitest'
import type { Comparison, RunResult } from '#shared/types/run'
import { coefficientRows, constantRows } from '../../../app/method/constants'
import { mapRegions } from '../../../app/result/map'
import { modelSigma, panelsOf, quantityOf } from '../../../app/result/panels'
import { jobEnded, jobText } from '../../../app/scenario/job'

const series = { massGt: [], lodMicroseconds: [10, 20, 30], chi1Mas: [1, 2, 3], chi2Mas: [4, 5, 6], sigmaLodMicroseconds: [1, null, 3], sigmaChi1Mas: [0.1, 0.2, 0.3], sigmaChi2Mas: [0, 0, 0] }
const result = { epochsMjd: [100, 130, 160], total: { series }, regions: [{ key: 'r1', scale: 1, massGtPerYear: { value: -5 } }, { key: 'r2', scale: 0, massGtPerYear: { value: 0 } }] } as unknown as RunResult
const lod = { unit: 'ms', observed: [1, 2], model: [1, 2], residual: [0, 0] }
const comparison = { epochsMjd: [130, 160], lod, chi1: null, chi2: null } as unknown as Comparison

describe('chart of a result', () => {
  it('carries the model’s sigma onto the comparison’s epochs and into its unit', () => {
    expect(modelSigma(result, comparison, 'lod')).toEqual([null, 0.003])
    expect(modelSigma(result, comparison, 'chi1')).toEqual([0.2, 0.3])
  })
  it('shows model and residual where there is an observation, the model alone otherwise', () => {
    expect(panelsOf(result, comparison, 'lod').map(panel => panel.series.map(line => line.role))).toEqual([['observed', 'model'], ['residual']])
    expect(panelsOf(result, comparison, 'chi1').map(panel => panel.series.map(line => line.role))).toEqual([['model']])
    expect(panelsOf(result, null, 'lod')[0]!.unit).toBe('µs')
  })
  it('opens with the day whatever an address says', () => {
    expect(quantityOf('chi2')).toBe('chi2')
    expect(quantityOf(['chi1'])).toBe('lod')
    expect(quantityOf('x')).toBe('lod')
  })
})

describe('map of a result', () => {
  it('gives no sign to a region that is switched off', () => {
    const source = (key: string) => ({ key, name: key, geometry: { type: 'Polygon', coordinates: [] } })
    expect(mapRegions(result, [source('r1'), source('r2')] as never).map(region => region.massGtPerYear)).toEqual([-5, null])
  })
})

describe('jobs', () => {
  it('end done, failed or cancelled', () => {
    expect((['waiting', 'running', 'done', 'failed', 'cancelled'] as const).map(jobEnded)).toEqual([false, false, true, true, true])
    expect(jobEnded(undefined)).toBe(false)
    expect(jobText('running', 0.95)).toBe('Storing the result')
  })
})

describe('constants of the method page', () => {
  it('are written from the engine, each with unit and source', () => {
    const rows = constantRows()
    expect(new Set(rows.map(row => `${row.symbol}${row.sub ?? ''}`)).size).toBe(rows.length)
    for (const row of rows) expect(row.value && row.unit && row.source, row.name).toBeTruthy()
    // Gross (2007), Treatise on Geophysics 3; IERS Conventions (2010).
    expect(rows.find(row => row.symbol === 'Ω')!.value).toBe('7.292115\u202f×\u202f10⁻⁵')
    expect(rows.find(row => row.symbol === 'R')!.value).toBe('6\u202f371\u202f000')
  })
  it('show the coefficient sets, and the whole Earth with the core coupled', () => {
    // 1.608 × 0.684 and 0.997 × 0.750, Gross (2007); 0.70 over 7.04e37, Barnes et al. (1983).
    expect(coefficientRows(['gross-2007'])[0]).toMatchObject({ aXY: '1.099872', aZ: '0.74775' })
    expect(coefficientRows(['barnes-1983'])[0]).toMatchObject({ aZ: '0.7', c: '7.0400\u202f×\u202f10³⁷' })
    expect(coefficientRows(['barnes-1983'], 'coupled')[0]).toMatchObject({ aZ: '0.695', c: '8.0365\u202f×\u202f10³⁷', aXY: '1' })
  })
})
