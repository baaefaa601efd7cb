import { readFile } from 'node:fs/promises'
import { loadDetailedEarthModel } from '#shared/earth/detailedEarthModel'
import { loadEarthModel, withFields, type EarthModel } from '#shared/earth/earthModel'
import { readFieldFile } from '#shared/earth/sensitivityField'

/** The Earth model that this build ships: with the sensitivity fields where their file is there, else without fingerprints. */
export async function earthModelFrom(fieldsPath: string | null): Promise<EarthModel> {
  if (!fieldsPath) return loadDetailedEarthModel()
  return withFields(loadEarthModel(), await readFieldFile(new Uint8Array(await readFile(fieldsPath))))
}
