import { readFileSync } from 'node:fs'
import { gunzipSync } from 'node:zlib'
import { contourOf } from '../../shared/earth/contour.ts'
import { loadOceanCells } from '../../shared/earth/detailedEarthModel.ts'
import { loadEarthModel, withFields, type EarthModel } from '../../shared/earth/earthModel.ts'
import { fingerprintOf } from '../../shared/earth/fingerprint.ts'
import { responseOf } from '../../shared/earth/response.ts'
import { seaLevelEquation } from '../../shared/earth/seaLevelEquation.ts'
import { sensitivityOf, functionals } from '../../shared/earth/sensitivity.ts'
import { splitFieldFile, unpackFields, type SensitivityFields } from '../../shared/earth/sensitivityField.ts'
import { sha256Hex } from '../../shared/earth/sha256.ts'
import type { Outline, PhysicsSettings } from '../../shared/types/domain.ts'
import { fastest, type Figure } from './measure.ts'
import { wavyOutline } from './outlines.ts'

const settings: PhysicsSettings = { ocean: 'fingerprint', coefficients: 'gross-2007', core: 'decoupled' }
const fieldsPath = 'public/earth/fields.bin'
const regions = 500
const months = 600

/** Milliseconds of one call, the best of five rounds of many. */
function each(calls: number, fn: () => unknown): number {
  return fastest(() => {
    for (let i = 0; i < calls; i++) fn()
  }) / calls
}

/** Responses of all regions and their product with all months: χ₁, χ₂, ΔLOD of each month. */
function sensitivityRoute(outlines: Outline[], massGt: Float64Array[], model: EarthModel): Float64Array {
  const sums = new Float64Array(3 * months)
  outlines.forEach((outline, r) => {
    const { chi1Mas, chi2Mas, lodMicroseconds } = responseOf(contourOf(outline), model, settings)
    const mass = massGt[r]!
    for (let t = 0; t < months; t++) {
      sums[t] = sums[t]! + chi1Mas * mass[t]!
      sums[months + t] = sums[months + t]! + chi2Mas * mass[t]!
      sums[2 * months + t] = sums[2 * months + t]! + lodMicroseconds * mass[t]!
    }
  })
  return sums
}

/** What `readFieldFile` does, without its stream. */
function unpack(file: Uint8Array): SensitivityFields {
  const { header, compressed } = splitFieldFile(file)
  const payload = new Uint8Array(gunzipSync(compressed))
  if (sha256Hex(payload) !== header.payloadSha256) throw new Error('damaged')
  return unpackFields(header, payload)
}

/** Speed of the numerical core. */
export function run(): Figure[] {
  const file = new Uint8Array(readFileSync(fieldsPath))
  const model = withFields(loadEarthModel(), unpack(file))
  const reading = fastest(() => unpack(file), 3)
  const cells = loadOceanCells()
  const respond = (vertices: number): number => {
    const outline = wavyOutline(vertices)
    return each(50, () => responseOf(contourOf(outline), model, settings))
  }
  const load = [{ contour: contourOf(wavyOutline(50, -40, 72, 5)), massGt: -280 }]
  const forward128 = fastest(() => fingerprintOf(load, cells, { degree: 128, feedback: false }), 3)
  const forward256 = fastest(() => fingerprintOf(load, cells, { degree: 256, feedback: false }), 1)
  const fields = fastest(() => {
    const equation = seaLevelEquation(cells, { degree: 128, feedback: false })
    for (const functional of functionals.slice(0, 4)) sensitivityOf(equation, functional)
  }, 2)
  const outlines = Array.from({ length: regions }, (_, r) => wavyOutline(50, -170 + (r % 25) * 14, -60 + Math.floor(r / 25) * 6.5, 3))
  const massGt = outlines.map((_, r) => Float64Array.from({ length: months }, (_, t) => Math.sin(r + t / 12) - r * t / 1e4))
  const route = fastest(() => sensitivityRoute(outlines, massGt, model), 3)
  return [
    { name: 'means of a 10 000-vertex outline', value: fastest(() => contourOf(wavyOutline(10_000))), unit: 'ms', note: 'target 5 ms' },
    { name: 'fingerprint response of a 50-vertex outline', value: respond(50), unit: 'ms', note: 'target 0.2 ms' },
    { name: 'fingerprint response of a 1 000-vertex outline', value: respond(1000), unit: 'ms', note: 'target 2 ms' },
    { name: 'forward solve at degree 128', value: forward128, unit: 'ms', note: 'set-up included; target 300 ms' },
    { name: 'forward solve at degree 256', value: forward256, unit: 'ms', note: 'set-up included; target 2 500 ms' },
    { name: 'four sensitivity fields at degree 128', value: fields, unit: 'ms', note: 'set-up included; target 2 000 ms' },
    { name: 'sensitivity fields read, checked and unpacked, both modes', value: reading, unit: 'ms', note: `${(file.length / 1e6).toFixed(2)} MB` },
    { name: `${regions} regions × ${months} months by sensitivities`, value: route, unit: 'ms', note: 'outlines measured anew; target 150 ms' },
    { name: 'forward solves over sensitivities, per region and month', value: forward128 * regions * months / route, unit: 'times', note: 'degree 128 against fields of degree 256' }
  ]
}
