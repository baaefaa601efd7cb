import type { OceanMode } from '../types/domain.ts'
import { gridStack, type GridStack } from './gridStack.ts'
import type { LoveTable } from './loadLoveNumbers.ts'
import { functionals, type Functional } from './sensitivity.ts'
import { sha256Hex } from './sha256.ts'

/** Modes whose answer rests on sensitivity fields. */
export const fingerprintModes = ['fingerprint', 'fingerprint-rotation'] as const satisfies readonly OceanMode[]
export type FingerprintMode = typeof fingerprintModes[number]

/** One field of the file: node values are whole multiples of `quantum`. */
export interface FieldEntry { mode: FingerprintMode | 'ocean', functional: Functional | 'fraction', quantum: number }

/** What the file says of itself, as JSON after the magic number. */
export interface FieldHeader {
  version: number
  engineVersion: string
  /** Truncation of the solver and rows of its grid. */
  degree: number
  rows: number
  love: LoveTable
  /** SHA-256 of the encoded ocean cells that the fields were made from. */
  oceanSha256: string
  /** Distance of the nodes in geodetic latitude and longitude, degrees. */
  stepDeg: number
  fields: FieldEntry[]
  /** SHA-256 of the payload before compression. */
  payloadSha256: string
}

/** Sensitivities K − g, ready for contour sums: `stacks[mode]` holds the functionals in their order. */
export interface SensitivityFields {
  header: FieldHeader
  stacks: Partial<Record<FingerprintMode, GridStack>>
  oceanField: GridStack
}

export const FIELD_VERSION = 1
const MAGIC = 'CPFIELD1'
/** Longest header that is read; a real one has some 2 000 bytes. */
const HEADER_LIMIT = 65_536

/** Nodes of a field at a step: both poles and both ends of the circle. */
export function nodeCount(stepDeg: number): { rows: number, columns: number } {
  return { rows: Math.round(180 / stepDeg) + 1, columns: Math.round(360 / stepDeg) + 1 }
}

/**
 * Payload of node values: each field as whole multiples of its quantum, the difference to what west, south and south-west foretell,
 * folded to positive, low bytes and then high bytes. The last column, a repetition of the first, is left out.
 */
export function encodePayload(fields: readonly { values: ArrayLike<number>, quantum: number }[], stepDeg: number): Uint8Array {
  const { rows, columns } = nodeCount(stepDeg)
  const width = columns - 1
  const nodes = rows * width
  const payload = new Uint8Array(2 * nodes * fields.length)
  fields.forEach(({ values, quantum }, f) => {
    const whole = new Int32Array(nodes)
    for (let i = 0; i < rows; i++) for (let j = 0; j < width; j++) whole[i * width + j] = Math.round(values[i * columns + j]! / quantum)
    for (let k = 0; k < nodes; k++) {
      const residual = whole[k]! - foretold(whole, k, width)
      const folded = residual >= 0 ? 2 * residual : -2 * residual - 1
      if (folded > 65_535) throw new RangeError(`a field of quantum ${quantum} changes too much between nodes: ${residual}`)
      payload[2 * nodes * f + k] = folded & 255
      payload[2 * nodes * f + nodes + k] = folded >> 8
    }
  })
  return payload
}

/** Node values of one field of a payload, the first column repeated at the end. */
export function decodeField(payload: Uint8Array, index: number, quantum: number, stepDeg: number): Float64Array {
  const { rows, columns } = nodeCount(stepDeg)
  const width = columns - 1
  const nodes = rows * width
  const start = 2 * nodes * index
  const whole = new Int32Array(nodes)
  const values = new Float64Array(rows * columns)
  for (let i = 0; i < rows; i++) {
    for (let j = 0; j < width; j++) {
      const k = i * width + j
      const folded = payload[start + k]! + 256 * payload[start + nodes + k]!
      whole[k] = foretold(whole, k, width) + (folded % 2 === 0 ? folded / 2 : -(folded + 1) / 2)
      values[i * columns + j] = whole[k]! * quantum
    }
    values[i * columns + width] = values[i * columns]!
  }
  return values
}

function foretold(whole: Int32Array, k: number, width: number): number {
  const first = k % width === 0
  if (k < width) return first ? 0 : whole[k - 1]!
  return first ? whole[k - width]! : whole[k - 1]! + whole[k - width]! - whole[k - width - 1]!
}

/** The field file: magic number, length of the header, header as JSON, payload compressed with gzip. */
export function fieldFile(header: FieldHeader, compressed: Uint8Array): Uint8Array {
  const text = new TextEncoder().encode(JSON.stringify(header))
  const bytes = new Uint8Array(MAGIC.length + 4 + text.length + compressed.length)
  for (let i = 0; i < MAGIC.length; i++) bytes[i] = MAGIC.charCodeAt(i)
  new DataView(bytes.buffer).setUint32(MAGIC.length, text.length)
  bytes.set(text, MAGIC.length + 4)
  bytes.set(compressed, MAGIC.length + 4 + text.length)
  return bytes
}

/** Header and compressed payload of a field file. Throws RangeError for another file, a damaged one or another version. */
export function splitFieldFile(bytes: Uint8Array): { header: FieldHeader, compressed: Uint8Array } {
  const start = MAGIC.length + 4
  if (bytes.length < start || String.fromCharCode(...bytes.subarray(0, MAGIC.length)) !== MAGIC) throw new RangeError('this is not a file of sensitivity fields')
  const length = new DataView(bytes.buffer, bytes.byteOffset).getUint32(MAGIC.length)
  if (length > HEADER_LIMIT || start + length > bytes.length) throw new RangeError('the file of sensitivity fields is damaged: its header does not fit')
  const header = JSON.parse(new TextDecoder().decode(bytes.subarray(start, start + length))) as FieldHeader
  if (header.version !== FIELD_VERSION) throw new RangeError(`sensitivity fields of version ${FIELD_VERSION} are needed, got ${header.version}`)
  return { header, compressed: bytes.subarray(start + length) }
}

/**
 * Reads a field file, in Node and in browsers alike. `modes` chooses what is unpacked (19 MB each in memory); default both.
 * Throws when the file is not one, is damaged (checksum) or has another version.
 */
export async function readFieldFile(bytes: Uint8Array, modes: readonly FingerprintMode[] = fingerprintModes): Promise<SensitivityFields> {
  const { header, compressed } = splitFieldFile(bytes)
  const stream = new Blob([compressed as Uint8Array<ArrayBuffer>]).stream().pipeThrough(new DecompressionStream('gzip'))
  const payload = new Uint8Array(await new Response(stream).arrayBuffer())
  const { rows, columns } = nodeCount(header.stepDeg)
  const expected = 2 * rows * (columns - 1) * header.fields.length
  if (payload.length !== expected) throw new RangeError(`the payload of sensitivity fields must have ${expected} bytes, got ${payload.length}`)
  const found = sha256Hex(payload)
  if (found !== header.payloadSha256) throw new RangeError(`the sensitivity fields are damaged: SHA-256 ${found} instead of ${header.payloadSha256}`)
  return unpackFields(header, payload, modes)
}

/** Stacks of the fields of a payload. */
export function unpackFields(header: FieldHeader, payload: Uint8Array, modes: readonly FingerprintMode[] = fingerprintModes): SensitivityFields {
  const field = (mode: FieldEntry['mode'], functional: FieldEntry['functional']): Float64Array => {
    const index = header.fields.findIndex(entry => entry.mode === mode && entry.functional === functional)
    if (index < 0) throw new RangeError(`the sensitivity fields lack ${functional} for the mode ${mode}`)
    return decodeField(payload, index, header.fields[index]!.quantum, header.stepDeg)
  }
  const stacks: SensitivityFields['stacks'] = {}
  for (const mode of modes) stacks[mode] = gridStack(functionals.map(functional => field(mode, functional)), header.stepDeg)
  return { header, stacks, oceanField: gridStack([field('ocean', 'fraction')], header.stepDeg) }
}
