import { contourOf } from '../earth/contour.ts'
import { coefficientsFor } from '../earth/coefficientSets.ts'
import {
  CHANDLER_PERIOD_DAYS, DYNAMICAL_FLATTENING_MOMENT, EQUATORIAL_MOMENT, MANTLE_EQUATORIAL_MOMENT, POLAR_MOMENT, POLE_MM_PER_MAS, ROTATION_RATE,
} from '../earth/constants.ts'
import type { EarthModel } from '../earth/earthModel.ts'
import { excitationScale, poleDirectionDegEast } from '../earth/excitation.ts'
import { responseOf } from '../earth/response.ts'
import type { OceanMode, Outline, PhysicsSettings, Position } from '../types/domain.ts'
import type { ReferenceCheck } from './check.ts'
import { outlineOfCase } from './loads.ts'

type Row = Omit<ReferenceCheck, 'group'>
const grouped = (group: string, rows: Row[]): ReferenceCheck[] => rows.map(row => ({ group, ...row }))
const settings = (ocean: OceanMode): PhysicsSettings => ({ ocean, coefficients: 'gross-2007', core: 'decoupled' })
const ring = (w: number, s: number, e: number, n: number): Position[] => [[w, s], [e, s], [e, n], [w, n], [w, s]]
const box = (w: number, s: number, e: number, n: number): Outline => ({ type: 'Polygon', coordinates: [ring(w, s, e, n)] })
const per = (outline: Outline, model: EarthModel, ocean: OceanMode) => responseOf(contourOf(outline), model, settings(ocean))

/** Figures that were printed in papers, news and conventions, computed again. */
export function publishedChecks(model: EarthModel): ReferenceCheck[] {
  return [...reservoir(model), ...oblateness(model), ...barystaticDay(model), ...constants(), ...ocean(model)]
}

function reservoir(model: EarthModel): ReferenceCheck[] {
  const r = per(outlineOfCase('O01'), model, 'fingerprint')
  const source = 'NASA, 10 January 2005: 40 km³ of water behind a dam near 30.8° N, 111° E'
  const cause = 'One printed digit: an order of magnitude.'
  return grouped('A reservoir of 40 km³', [
    { id: 'reservoir-lod', title: 'Longer day', unit: 'µs', computed: 40 * r.lodMicroseconds, reference: 0.06, tolerance: { kind: 'factor', within: 2 }, source, origin: 'published', cause },
    { id: 'reservoir-pole', title: 'Shift of the pole', unit: 'cm', computed: 40 * Math.hypot(r.chi1Mas, r.chi2Mas) * POLE_MM_PER_MAS / 10, reference: 2, tolerance: { kind: 'factor', within: 1.25 }, source, origin: 'published', cause },
  ])
}

function oblateness(model: EarthModel): ReferenceCheck[] {
  const source = 'Nerem & Wahr (2011), GRL 38, L13501: dJ₂/dt 2002–2010. Mass rates: Velicogna (2009), GRL 36, L19503, middle of its range (from memory)'
  const cause = 'Mass rates of another year and crude outlines: within a factor.'
  const row = (id: string, title: string, outline: Outline, rate: number, reference: number): Row => ({
    id, title, unit: '10⁻¹¹ per year', computed: rate * per(outline, model, 'fingerprint').deltaJ2 * 1e11, reference, tolerance: { kind: 'factor', within: 1.5 }, source, origin: 'published', cause,
  })
  return grouped('Oblateness', [
    row('j2-greenland', 'Greenland, −212 Gt per year', outlineOfCase('O02'), -212, 2.0),
    row('j2-antarctica', 'Antarctica, −175 Gt per year', outlineOfCase('O03'), -175, 1.7),
  ])
}

/** Rates since 2000 on outlines that anybody can draw, in Gt per year. */
const lossesSince2000: [Outline, number][] = [
  [outlineOfCase('O02'), -306], [outlineOfCase('O13'), -140],
  [box(-154, 58, -136, 63), -61], [box(-128, 48, -114, 58), -12], [box(-95, 76, -65, 83), -31], [box(-80, 63, -62, 74), -27],
  [box(-21, 63.5, -15, 66), -8], [{ type: 'MultiPolygon', coordinates: [[ring(11, 76.5, 27, 80.5)], [ring(52, 73, 66, 77)]] }, -27],
  [box(70, 28, 98, 42), -32], [box(-75, -52, -72, -46), -26], [box(6, 45, 13, 47), -13],
  [box(70, 22, 84, 32), -75], [{ type: 'MultiPolygon', coordinates: [[ring(-122, 33, -98, 40)], [ring(40, 28, 52, 38)]] }, -51],
]

function barystaticDay(model: EarthModel): ReferenceCheck[] {
  const lod = lossesSince2000.reduce((sum, [outline, rate]) => sum + rate * per(outline, model, 'fingerprint').lodMicroseconds, 0)
  return grouped('The day since 2000', [{
    id: 'barystatic-lod', title: 'Ice sheets, glaciers and groundwater together', unit: 'ms per century', computed: lod / 10, reference: 1.33,
    tolerance: { kind: 'factor', within: 1.35 }, origin: 'published',
    source: 'Kiani Shahvandi et al. (2024), PNAS, e2406930121: 1.33 ± 0.03. Masses: GlaMBIE (2025) glaciers −273 Gt per year; Seo et al. (2023) groundwater; ice sheets from memory',
    cause: 'Crude outlines; soil, lakes and reservoirs are left out.',
  }])
}

function constants(): ReferenceCheck[] {
  const scale = (id: 'gross-2007' | 'barnes-1983', core: 'decoupled' | 'coupled' = 'decoupled') => excitationScale(1, coefficientsFor(id, core))
  const gross = 'Gross (2007), Treatise on Geophysics 3'
  return grouped('Constants and arithmetic', [
    { id: 'chandler', title: 'Rotational factor from the Chandler period', unit: '1', computed: DYNAMICAL_FLATTENING_MOMENT * ROTATION_RATE / (MANTLE_EQUATORIAL_MOMENT * 2 * Math.PI / (CHANDLER_PERIOD_DAYS * 86_400)), reference: 1.608, tolerance: { kind: 'absolute', within: 0.0015 }, source: gross, origin: 'published', cause: 'Moments of four to five digits.' },
    { id: 'euler', title: 'Euler period', unit: 'd', computed: EQUATORIAL_MOMENT / DYNAMICAL_FLATTENING_MOMENT, reference: 304.5, tolerance: { kind: 'absolute', within: 0.05 }, source: 'Recomputed from the moments of Gross (2007)', origin: 'arithmetic', cause: 'Rounding.' },
    { id: 'barnes-chi', title: 'χ of Barnes et al. (1983) over Gross (2007)', unit: '1', computed: scale('barnes-1983').chiMas / scale('gross-2007').chiMas, reference: 1.02, tolerance: { kind: 'absolute', within: 0.001 }, source: 'Barnes et al. (1983), Proc. R. Soc. A 387, 31–73; Gross (2007)', origin: 'arithmetic', cause: 'Rounding of the quoted ratio.' },
    { id: 'barnes-lod', title: 'ΔLOD of Barnes et al. (1983) over Gross (2007)', unit: '1', computed: scale('barnes-1983').lodMicroseconds / scale('gross-2007').lodMicroseconds, reference: 0.947, tolerance: { kind: 'absolute', within: 0.001 }, source: 'Barnes et al. (1983); Gross (2007)', origin: 'arithmetic', cause: 'Rounding of the quoted ratio.' },
    { id: 'ren', title: 'Change of the day by 10.1 × 10²⁷ kg m² per year, whole Earth', unit: 'µs per year', computed: 86_400e6 * 10.1e27 / POLAR_MOMENT, reference: 10.91, tolerance: { kind: 'relative', within: 0.006 }, source: 'Ren (2021), with C = 8.00 × 10³⁷ kg m²', origin: 'published', cause: 'C of 8.0365 × 10³⁷ here: 0.5 % less.' },
    { id: 'secular-direction', title: 'Direction of the secular pole', unit: '° E', computed: poleDirectionDegEast(1.677, -3.460)!, reference: -64.1, tolerance: { kind: 'absolute', within: 0.05 }, source: 'IERS Conventions (2010), ch. 7, update of 2018: ẋ = 1.677, ẏ = 3.460 mas per year', origin: 'published', cause: 'Rounding; catches a wrong sign of y.' },
  ])
}

function ocean(model: EarthModel): ReferenceCheck[] {
  const source = 'Independent reference implementation; Natural Earth 1:50m, Caspian filled as land'
  const row = (id: string, title: string, computed: number, reference: number): Row => ({
    id, title, unit: '1', computed, reference, tolerance: { kind: 'absolute', within: 1e-5 }, source, origin: 'independent', cause: 'Coast integrated along its edges here, in cells there; five printed digits.',
  })
  return grouped('Ocean function', [
    row('ocean-fraction', 'Fraction of the sphere', model.ocean.fraction, 0.71144),
    row('ocean-cos2', '⟨cos² ψ⟩', model.ocean.means.cos2, 0.68863),
    row('ocean-xz', '⟨sin ψ cos ψ cos λ⟩', model.ocean.means.xz, -0.01505),
    row('ocean-yz', '⟨sin ψ cos ψ sin λ⟩', model.ocean.means.yz, -0.02228),
  ])
}
