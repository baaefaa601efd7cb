import { describe, expect, it } from 'vitest'
import { understandUnit } from '../../../shared/series/quantities.ts'
import type { Quantity } from '../../../shared/series/quantityKinds.ts'

// BIPM, The International System of Units, 9th edition (2019): table 8 (1 t = 10³ kg, 1 l = 10⁻³ m³), table 7 (prefixes).
// NIST Special Publication 811 (2008), appendix B.8: 1 ft = 0.3048 m, 1 in = 0.0254 m, 1 ft³ = 2.831 685 × 10⁻² m³,
// acre-foot = 1.233 489 × 10³ m³ (with the survey foot, retired at the end of 2022 by Federal Register 85 FR 62698; the international
// foot, taken here, is 2 × 10⁻⁶ shorter, so its cube 6 × 10⁻⁶ smaller). IAU (2012), Style Manual: a is 365.25 d of 86 400 s.
const published: [string, Quantity, number, number][] = [
  ['Gt', 'mass', 1, 1e-15],
  ['Mt', 'mass', 1e-3, 1e-15],
  ['kg', 'mass', 1e-12, 1e-15],
  ['t', 'mass', 1e-9, 1e-15],
  ['Pg', 'mass', 1, 1e-15],
  ['Tg', 'mass', 1e-3, 1e-15],
  ['km³', 'volume', 1, 1e-15],
  ['10⁶ m³', 'volume', 1e-3, 1e-15],
  ['GL', 'volume', 1e-3, 1e-15],
  ['ML', 'volume', 1e-6, 1e-15],
  ['ft³', 'volume', 2.831685e-2 / 1e9, 2e-7],
  ['acre-foot', 'volume', 1.233489e3 / 1e9, 6.5e-6],
  ['million acre-feet', 'volume', 1.233489, 6.5e-6],
  ['mm', 'water-height', 1e-3, 1e-15],
  ['cm', 'water-height', 1e-2, 1e-15],
  ['in', 'water-height', 0.0254, 1e-15],
  ['ft', 'head', 0.3048, 1e-15],
  ['Gt/yr', 'mass-rate', 1, 1e-15],
  ['kg/s', 'mass-rate', 365.25 * 86_400 / 1e12, 1e-15],
  ['Gt/d', 'mass-rate', 365.25, 1e-15]
]

describe('units by published definitions', () => {
  it.each(published)('%s of %s', (text, quantity, expected, tolerance) => {
    expect(Math.abs(understandUnit(text, quantity).factor / expected - 1)).toBeLessThanOrEqual(tolerance)
  })

  it('takes the acre-foot of the international foot to its last digit: 43 560 ft³ of (0.3048 m)³', () => {
    // 43 560 × 0.028 316 846 592 m³, an exact product.
    expect(understandUnit('acre-feet', 'volume').factor).toBeCloseTo(1233.48183754752 / 1e9, 21)
  })

  it('takes a kilogram per square metre for a millimetre of water, 1000 kg/m³', () => {
    // WMO, Guide to Instruments and Methods of Observation (2021), 6.1.2: 1 mm of precipitation is 1 kg/m².
    expect(understandUnit('kg/m²', 'water-height').factor).toBeCloseTo(1e-3, 18)
  })
})
