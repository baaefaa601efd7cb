import { readFileSync } from 'node:fs'
import { beforeAll, describe, expect, it } from 'vitest'
import { withOcean } from '~/composables/useLiveEarth'
import { outlineEffect } from '~/map/outlineEffect'
import { loadEarthModel, withFields, type EarthModel } from '#shared/earth/earthModel'
import { readFieldFile } from '#shared/earth/sensitivityField'
import type { Outline } from '#shared/types/domain'

const outline: Outline = { type: 'Polygon', coordinates: [[[-50, 65], [-30, 65], [-30, 80], [-50, 80], [-50, 65]]] }
let file: Uint8Array
const withModes = async (modes: Parameters<typeof readFieldFile>[1]): Promise<EarthModel> => withFields(loadEarthModel(), await readFieldFile(file, modes))
beforeAll(() => { file = new Uint8Array(readFileSync('public/earth/fields.bin')) })

describe('the ocean that is chosen on the map', () => {
  it('is the one that the figures are for', async () => {
    const earth = await withModes(['fingerprint', 'fingerprint-rotation'])
    const lod = (['none', 'uniform', 'fingerprint', 'fingerprint-rotation'] as const).map(mode => outlineEffect(outline, withOcean(earth, mode)!))
    expect(lod.map(effect => effect.ocean)).toEqual(['none', 'uniform', 'fingerprint', 'fingerprint-rotation'])
    expect(new Set(lod.map(effect => effect.lodMicroseconds)).size).toBe(4)
    // A gigatonne lost at the pole's latitude that is spread over the sea, mean of cos²φ over the ocean ~ 0.69 (Gross 2015, from memory), lengthens the day by more
    // than one that vanishes.
    expect(lod[1]!.lodMicroseconds).toBeGreaterThan(lod[0]!.lodMicroseconds)
  })

  it('is awaited while its fields are on their way, and the engine’s own where there are none', async () => {
    const earth = await withModes(['fingerprint'])
    expect(withOcean(earth, null)).toBe(earth)
    expect(withOcean(earth, 'fingerprint-rotation')).toBeNull()
    const constant = loadEarthModel()
    expect(withOcean(constant, 'fingerprint')).toBe(constant)
    expect(withOcean(constant, 'none')!.defaultOcean).toBe('none')
  })
})
