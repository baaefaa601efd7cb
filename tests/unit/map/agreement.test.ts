import { describe, expect, it } from 'vitest'
import { agreementWords, differenceOf } from '../../../app/map/agreement'
import { outlineEffect } from '../../../app/map/outlineEffect'
import { loadEarthModel } from '../../../shared/earth/earthModel'
import type { Outline } from '../../../shared/types/domain'

const outline: Outline = { type: 'Polygon', coordinates: [[[70, 25], [80, 25], [80, 32], [70, 32], [70, 25]]] }
const model = loadEarthModel()
const mine = outlineEffect(outline, model)
const server = { areaKm2: mine.areaKm2, ocean: model.defaultOcean, lodMicroseconds: -mine.lodMicroseconds, chi1Mas: -mine.chi1Mas, chi2Mas: -mine.chi2Mas }

describe('browser against server', () => {
  it('agrees to the last bits, and says what differs and why', () => {
    expect(differenceOf(outline, model, server)).toBe(0)
    expect(agreementWords(outline, model, server)).toMatchObject({ agrees: true })
    // A millionth of an area, and a component that vanishes: 1e-8 mas of 0.0185 mas.
    expect(differenceOf(outline, model, { ...server, areaKm2: server.areaKm2 * (1 + 1e-6) })).toBeCloseTo(1e-6, 9)
    expect(differenceOf(outline, model, { ...server, chi1Mas: server.chi1Mas + 1e-8 })).toBeCloseTo(1e-8 / 0.0185, 12)
    expect(agreementWords(outline, model, { ...server, chi2Mas: server.chi2Mas + 1e-8 })).toMatchObject({ agrees: false, text: expect.stringMatching(/5\.4\s×\s10⁻⁷/) })
    expect(agreementWords(outline, model, { ...server, chi2Mas: server.chi2Mas + 1e-4, patterned: true })).toMatchObject({ agrees: true, text: expect.stringMatching(/pattern of the region’s grid/) })
    expect(agreementWords(outline, model, { ...server, ocean: 'fingerprint-rotation' }).text).toMatch(/another response of the ocean/)
  })
})
