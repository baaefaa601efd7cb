import type { OceanMode } from '../types/domain.ts'
import { oceanMeans } from './data/oceanMeans.ts'
import { ENGINE_VERSION } from './engineVersion.ts'
import type { GridStack } from './gridStack.ts'
import type { OceanFunction } from './oceanFunction.ts'
import type { SensitivityFields } from './sensitivityField.ts'

/** The Earth that a response is computed on: immutable, handed to every function that needs it. */
export interface EarthModel {
  engineVersion: string
  /** Names the ocean function and the sensitivity fields by their SHA-256; part of every run's hash. */
  checksum: string
  ocean: OceanFunction
  /** Sea (1) and land (0) as a field; null until attached, and then no warning about sea inside an outline is given. */
  oceanField: GridStack | null
  /** Sensitivity fields of the fingerprint modes; null: those modes are not available. */
  fields: SensitivityFields | null
  /** The mode that is taken when none is asked for. */
  defaultOcean: OceanMode
}

/** A mode was asked for whose sensitivity fields the model does not hold; an API answers it with 501. */
export class ModeNotAvailableError extends Error {
  readonly mode: OceanMode

  constructor(mode: OceanMode) {
    super(`The ocean mode "${mode}" needs the sensitivity fields, which this Earth model does not hold.`)
    this.name = 'ModeNotAvailableError'
    this.mode = mode
  }
}

/** The constant model: enough for the modes `none` and `uniform`, and light enough for a browser. */
export function loadEarthModel(): EarthModel {
  const { fraction, areaM2, means, vector, ellipsoidMeans, sha256 } = oceanMeans
  return Object.freeze({
    engineVersion: ENGINE_VERSION,
    checksum: `ocean ${sha256.slice(0, 16)}`,
    ocean: { fraction, areaM2, means, vector, ellipsoidMeans, sha256 },
    oceanField: null,
    fields: null,
    defaultOcean: 'uniform'
  })
}

/** The same model with the field that tells sea from land inside an outline. */
export function withOceanField(model: EarthModel, oceanField: GridStack): EarthModel {
  return Object.freeze({ ...model, oceanField })
}

/**
 * The model with its sensitivity fields: the fingerprint modes become available and `fingerprint` the default.
 * Throws RangeError when the fields were made from another ocean function.
 */
export function withFields(model: EarthModel, fields: SensitivityFields): EarthModel {
  const { oceanSha256, payloadSha256 } = fields.header
  if (oceanSha256 !== model.ocean.sha256) throw new RangeError(`sensitivity fields must belong to the ocean ${model.ocean.sha256}, got ${oceanSha256}`)
  return Object.freeze({
    ...model,
    checksum: `ocean ${model.ocean.sha256.slice(0, 16)}, fields ${payloadSha256.slice(0, 16)}`,
    oceanField: fields.oceanField,
    fields,
    defaultOcean: 'fingerprint'
  })
}
