import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { loadEarthModel, withFields, type EarthModel } from '../../../shared/earth/earthModel.ts'
import { readFieldFile } from '../../../shared/earth/sensitivityField.ts'

/** Bytes of the field file that ships. */
export function fieldBytes(): Uint8Array {
  return new Uint8Array(readFileSync(fileURLToPath(new URL('../../../public/earth/fields.bin', import.meta.url))))
}

/** The Earth model with the fields that ship. */
export async function shippedModel(): Promise<EarthModel> {
  return withFields(loadEarthModel(), await readFieldFile(fieldBytes()))
}
