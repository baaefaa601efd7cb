import { contourOf } from '../earth/contour.ts'
import type { EarthModel } from '../earth/earthModel.ts'
import { responseOf } from '../earth/response.ts'
import type { OceanMode, Outline, PhysicsSettings } from '../types/domain.ts'
import type { ReferenceCheck, Tolerance } from './check.ts'
import data from './data/loadCases.json' with { type: 'json' }

interface Case {
  id: string
  title: string
  loads: { mass_Gt: number, geometry: Outline }[]
  expected: {
    scale_chi_mas: number
    scale_dLOD_us: number
    barystatic_mm: number
    modes: Record<string, { chi1_mas: number, chi2_mas: number, dLOD_us: number }>
  }
}

const modes: { mode: OceanMode, key: string, within: number, cause: string }[] = [
  { mode: 'none', key: 'none', within: 2e-5, cause: 'Edges are densified in another way.' },
  { mode: 'uniform', key: 'uniform', within: 5e-4, cause: 'The ocean function is integrated in another way.' },
  { mode: 'fingerprint', key: 'fingerprint', within: 1e-3, cause: 'Cells of another make, and fields stored at nodes of 0.5°.' },
  { mode: 'fingerprint-rotation', key: 'fingerprint_rot', within: 1e-3, cause: 'Cells of another make, and fields stored at nodes of 0.5°.' },
]
const source = 'Independent reference implementation in another language, from the published formulas, degree 256'

/** χ₁, χ₂ and ΔLOD of twelve loads in four ocean modes, by part of the load’s scale. */
export function loadChecks(model: EarthModel): ReferenceCheck[] {
  const cases = (data as unknown as { cases: Case[] }).cases
  return modes.flatMap(({ mode, key, within, cause }) => cases.flatMap((c) => {
    const settings: PhysicsSettings = { ocean: mode, coefficients: 'gross-2007', core: 'decoupled' }
    let [chi1, chi2, lod] = [0, 0, 0]
    for (const { mass_Gt: massGt, geometry } of c.loads) {
      const r = responseOf(contourOf(geometry), model, settings)
      chi1 += massGt * r.chi1Mas
      chi2 += massGt * r.chi2Mas
      lod += massGt * r.lodMicroseconds
    }
    const wanted = c.expected.modes[key]!
    const row = (quantity: string, unit: string, computed: number, reference: number, scale: number): ReferenceCheck => ({
      id: `${c.id}-${mode}-${quantity}`, group: `Loads, ocean ${mode}`, title: `${c.title}: ${quantity}`, unit, computed, reference,
      tolerance: { kind: 'scale', within, scale } satisfies Tolerance, source, origin: 'independent', cause,
    })
    return [
      row('χ₁', 'mas', chi1, wanted.chi1_mas, c.expected.scale_chi_mas),
      row('χ₂', 'mas', chi2, wanted.chi2_mas, c.expected.scale_chi_mas),
      row('ΔLOD', 'µs', lod, wanted.dLOD_us, c.expected.scale_dLOD_us),
    ]
  }))
}

/** The outline of a case by its identifier, for checks that stand on the same ground. */
export function outlineOfCase(id: string): Outline {
  return (data as unknown as { cases: Case[] }).cases.find(c => c.id === id)!.loads[0]!.geometry
}
