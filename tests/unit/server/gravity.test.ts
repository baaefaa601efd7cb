import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, describe, expect, it } from 'vitest'
import type { GravityFields } from '#shared/observed/gravityTypes'
import { newId } from '../../../server/services/change'
import { createGravity } from '../../../server/services/gravity'
import { sha256Hex } from '../../../server/services/hash'
import { binObserved, listObserved, loadObserved, observedRow, observedSummary, readObserved } from '../../../server/services/observed'
import { createFluid } from '../../../server/services/angularMomentum'
import { readChainOfObserved } from '../../../server/services/observedChain'
import chain from '../../../server/workers/chain'
import { populate, temporaryContext } from '../../support/context'

const context = temporaryContext()
Object.defineProperty(context, 'jobs', { value: { compute: async (_: string, task: never) => chain(structuredClone(task)) } })
const { workspaceId, people } = populate(context, ['lead', 'reader'])
afterAll(() => context.dispose())

function upload(text: string) {
  const path = join(context.dataDir, newId())
  writeFileSync(path, text)
  return { path, name: 'degree2.csv', type: 'text/csv', bytes: text.length, sha256: sha256Hex(text) }
}
const fields: GravityFields = { solidPoleTide: 'removed', oceanPoleTide: 'removed', permanentTide: 'zero-tide', meanPole: 'secular-2018', radiusM: 6371000, dealiasing: 'not-restored', axialLoadFactor: 0.695 }
const body = { name: 'Gravity', source: 'test', licence: '', independence: '', fields, leaveOutBadRows: false }
/** Twelve years of months; C₂₀ falls by 10⁻¹¹/√5 a year, which is 10⁻¹¹ of J₂. */
const months = Array.from({ length: 144 }, (_, i) => 53005 + 30.4375 * i)
const table = `mjd,dC20,dC21,dS21,sigma C20\n${months.map(t => `${t},${(-1e-11 / Math.sqrt(5) * (t - 55000) / 365.25).toExponential(12)},1e-12,2e-12,1e-12`).join('\n')}\n`

describe('gravity coefficients as an observed series', () => {
  it('are kept as sent, shown as excitation, and reduced to the trend that J₂ stands for', async () => {
    const id = await createGravity(context, people.lead, workspaceId, upload(table), body)
    const summary = observedSummary(context, people.reader, observedRow(context, id))
    expect(summary).toMatchObject({ format: 'gravity', has: { pole: false, lod: true, excitation: true }, gravity: { fields }, canWrite: false })
    expect(listObserved(context, people.reader, workspaceId, { limit: 10 }).items.map(item => item.name)).toEqual(['Gravity'])
    const read = readObserved(context, people.reader, id)
    expect(read.coefficients!.c21[3]).toBe(1e-12)
    expect(read.coefficients!.sigmaS21[3]).toBeNull()

    const reduced = await readChainOfObserved(context, people.reader, id, { points: 500 })
    // 0.211 ms per century for 10⁻¹¹ of J₂ a year with the mantle's C, as recomputed from Gross (2007).
    expect(reduced.trends.lod!.value * 100).toBeCloseTo(0.211, 3)
    expect(reduced.chartNote).not.toContain('tides')
    expect(reduced.warnings.map(({ code }) => code)).toContain('dealiasing-out')
  })

  it('take the core and coefficients of the run that they are held against', async () => {
    const { id } = listObserved(context, people.reader, workspaceId, { limit: 1 }).items[0]!
    const day = (core: 'coupled' | 'decoupled') => loadObserved(context, id, { ocean: 'fingerprint-rotation', coefficients: 'gross-2007', core })
    // 0.174 against 0.211: the whole Earth's C against the mantle's.
    expect(day('decoupled').lodMs[0]! / day('coupled').lodMs[0]!).toBeCloseTo(0.211 / 0.174, 2)
    expect(day('coupled').chi1Mas![0]!).toBe(loadObserved(context, id).chi1Mas![0]!)
  })

  it('refuse an atmosphere that they were made without, bad rows, and people who may not write', async () => {
    const { id } = listObserved(context, people.reader, workspaceId, { limit: 1 }).items[0]!
    const air = await createFluid(context, people.lead, workspaceId, upload('2010 1 1 0 55197.0 1e-7 2e-7 3e-9 4e-9 5e-9 6e-9\n2010 1 2 0 55198.0 1e-7 2e-7 3e-9 4e-9 5e-9 6e-9\n'), {
      name: 'Air', source: 'test', licence: '', leaveOutBadRows: false,
      fields: { component: 'atmosphere', model: 'invented', pairedWith: null, invertedBarometer: 'yes', coefficients: 'gross-2007', subtracted: '', barystatic: 'no' },
    })
    const text = JSON.stringify({ schemaVersion: 1, from: null, to: null, includePredictions: false, steps: [{ kind: 'angular-momentum', on: true, correction: air.id, mass: true, motion: true, trend: false }] })
    await expect(readChainOfObserved(context, people.lead, id, { chain: text, points: 100 })).rejects.toMatchObject({ issues: [{ code: 'counted-twice' }] })
    await expect(createGravity(context, people.lead, workspaceId, upload(`${table}55300,x,1,1,1\n`), body)).rejects.toMatchObject({ issues: [{ row: 146 }] })
    await expect(createGravity(context, people.reader, workspaceId, upload(table), body)).rejects.toMatchObject({ status: 403 })
    binObserved(context, people.lead, id, 1)
    expect(listObserved(context, people.reader, workspaceId, { limit: 10 }).items).toEqual([])
  })
})
