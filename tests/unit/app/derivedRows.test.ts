import { describe, expect, it } from 'vitest'
import { derivedRows, type Effect } from '../../../app/regions/derivedRows'

const effect: Effect = {
  ocean: 'fingerprint', chi1Mas: -0.01, chi2Mas: 0.01, chi3: 1e-15, lodMicroseconds: -0.0241, barystaticMm: -0.002755, deltaJ2: -1.1e-13,
  deltaC21: 2e-14, deltaS21: -3.05e-14, geocentreMm: { x: 0.0002, y: -0.0001, z: 0.0011 },
}

describe('per hundred gigatonnes lost', () => {
  const rows = derivedRows([effect, { ...effect, ocean: 'fingerprint-rotation', lodMicroseconds: -0.02412, geocentreMm: null }])
  const cells = (name: string) => rows.find(row => row.name === name)!.cells
  it('turns the sign and counts a hundred', () => {
    expect(cells('length of day')).toEqual(['+2.41', '+2.41'])
    expect(cells('pole χ₁')).toEqual(['+1.00', '+1.00'])
    // √2 × 0.01 mas × 100 × 3.0887 cm per mas.
    expect(cells('shift of the pole')).toEqual(['4.37', '4.37'])
    expect(cells('towards')).toEqual(['45°\u00a0W', '45°\u00a0W'])
    expect(cells('barystatic sea level')).toEqual(['+0.276', '+0.276'])
    expect(cells('ΔJ₂')).toEqual(['+1.10', '+1.10'])
    expect(cells('ΔC₂₁')).toEqual(['−0.200', '−0.200'])
    expect(cells('ΔS₂₁')).toEqual(['+0.305', '+0.305'])
  })
  it('leaves the geocentre open where there is none', () => {
    expect(cells('geocentre z, to north')).toEqual(['−0.110', '–'])
    expect(cells('geocentre y, to 90°\u00a0E')).toEqual(['+0.0100', '–'])
  })
})
