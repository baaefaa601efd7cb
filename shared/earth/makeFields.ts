import { ENGINE_VERSION } from './engineVersion.ts'
import { valuesOnNodes } from './harmonicValues.ts'
import type { OceanCells } from './oceanCells.ts'
import { oceanNodeValues } from './oceanFunction.ts'
import { seaLevelEquation } from './seaLevelEquation.ts'
import { functionals, sensitivityOf, type Functional } from './sensitivity.ts'
import { encodePayload, FIELD_VERSION, fingerprintModes, nodeCount, type FieldEntry, type FieldHeader } from './sensitivityField.ts'
import { sha256Hex } from './sha256.ts'

/** Steps that node values are rounded to: 2e-5 of the largest degree-2 mean is below 2e-5 of scale; the geocentre needs less. */
const QUANTUM: Readonly<Record<Functional, number>> = { xz: 1e-5, yz: 1e-5, p2: 2e-5, x: 1e-4, y: 1e-4, z: 1e-4 }
const OCEAN_QUANTUM = 1 / 100

export interface MakeFieldsOptions { degree: number, stepDeg: number, oceanSha256: string }

/** Solves for every sensitivity field of both fingerprint modes and packs them, the sea's field last. Some 20 s at degree 256. */
export function makeFields(cells: OceanCells, { degree, stepDeg, oceanSha256 }: MakeFieldsOptions): { header: FieldHeader, payload: Uint8Array } {
  const { rows, columns } = nodeCount(stepDeg)
  const latitudes = Float64Array.from({ length: rows }, (_, i) => -90 + i * stepDeg)
  const longitudes = Float64Array.from({ length: columns }, (_, j) => -180 + j * stepDeg)
  const fields: { values: Float64Array, quantum: number }[] = []
  const entries: FieldEntry[] = []
  let solverRows = 0
  for (const mode of fingerprintModes) {
    const equation = seaLevelEquation(cells, { degree, feedback: mode === 'fingerprint-rotation' })
    solverRows = equation.grid.rows
    for (const functional of functionals) {
      const { smooth, constant } = sensitivityOf(equation, functional)
      const values = valuesOnNodes(smooth, latitudes, longitudes)
      for (let k = 0; k < values.length; k++) values[k] = values[k]! + constant
      fields.push({ values, quantum: QUANTUM[functional] })
      entries.push({ mode, functional, quantum: QUANTUM[functional] })
    }
  }
  fields.push({ values: oceanNodeValues(cells, stepDeg), quantum: OCEAN_QUANTUM })
  entries.push({ mode: 'ocean', functional: 'fraction', quantum: OCEAN_QUANTUM })
  const payload = encodePayload(fields, stepDeg)
  const header: FieldHeader = {
    version: FIELD_VERSION, engineVersion: ENGINE_VERSION, degree, rows: solverRows, love: 'wang-2012', oceanSha256, stepDeg,
    fields: entries, payloadSha256: sha256Hex(payload)
  }
  return { header, payload }
}
