import { describe, expect, it } from 'vitest'
import type { RunInput } from '#shared/types/run'
import run from '../../../server/workers/run'

const mjd = Array.from({ length: 36 }, (_, i) => 53019 + 30 * i)
const input: RunInput = {
  schemaVersion: 1,
  settings: { ocean: 'uniform', coefficients: 'gross-2007', core: 'decoupled', fromMjd: null, toMjd: null, maxGapDays: 62 },
  regions: [{
    key: 'r1', name: 'Plain', kind: 'aquifer', agency: 'Office', outlineSha256: '0', seriesVersion: 1, seriesSha256: '0', source: 'Invented.', scale: 1,
    geometry: { type: 'Polygon', coordinates: [[[70, 25], [80, 25], [80, 30], [70, 30], [70, 25]]] },
    series: { mjd, massGt: mjd.map((_, i) => -2 * i), sigmaGt: null, sharedRates: [] },
  }],
  background: [],
  restOfWorld: null,
}

describe('the worker that runs a scenario', () => {
  it('gives the result', async () => {
    const answer = await run({ input, fieldsPath: null })
    expect('result' in answer && answer.result.regions[0]!.name).toBe('Plain')
  })

  it('hands faults of the input over as plain data, so that their issues survive the way between threads', async () => {
    const answer = structuredClone(await run({ input: { ...input, settings: { ...input.settings, fromMjd: 33282, toMjd: 36934 } }, fieldsPath: null }))
    expect(answer).toMatchObject({ fault: { status: 422 } })
    if (!('fault' in answer)) throw new Error('expected a fault')
    expect(answer.fault.issues).toHaveLength(1)
    expect(answer.fault.issues[0]).toMatchObject({ path: 'regions/0/series' })
    expect(answer.fault.issues[0]!.message).toMatch(/Plain/)
  })
})
