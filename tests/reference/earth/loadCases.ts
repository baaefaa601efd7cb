import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { responseOf, type ResponsePerGt } from '../../../shared/earth/response.ts'
import { contourOf } from '../../../shared/earth/contour.ts'
import type { EarthModel } from '../../../shared/earth/earthModel.ts'
import type { Outline, PhysicsSettings } from '../../../shared/types/domain.ts'

export interface ReferenceMode { chi1_mas: number, chi2_mas: number, dLOD_us: number, chi3: number, dJ2?: number, dI_kgm2: [number, number, number], dC20?: number, dC21?: number, dS21?: number }
export interface LoadCase {
  id: string
  title: string
  loads: { mass_Gt: number, geometry: Outline }[]
  expected: {
    barystatic_mm: number
    regions: { area_km2: number, area_sr: number, mean_sincos_cos: number, mean_sincos_sin: number, mean_cos2: number }[]
    scale_chi_mas: number
    scale_dLOD_us: number
    modes: Record<'none' | 'uniform' | 'fingerprint' | 'fingerprint_rot', ReferenceMode>
  }
}

/** Cases of the independent reference implementation, see shared/validation/data/README.md. */
export function loadCases(): LoadCase[] {
  const path = fileURLToPath(new URL('../../../shared/validation/data/loadCases.json', import.meta.url))
  return (JSON.parse(readFileSync(path, 'utf8')) as { cases: LoadCase[] }).cases
}

/** Sum of the case's loads in one mode. */
export function answerOf(loads: LoadCase['loads'], model: EarthModel, settings: PhysicsSettings): ResponsePerGt {
  const sum: ResponsePerGt = { chi1Mas: 0, chi2Mas: 0, chi3: 0, lodMicroseconds: 0, barystaticMm: 0, deltaJ2: 0 }
  for (const { mass_Gt: massGt, geometry } of loads) {
    const response = responseOf(contourOf(geometry), model, settings)
    for (const key of Object.keys(sum) as (keyof ResponsePerGt)[]) sum[key] += response[key] * massGt
  }
  return sum
}
