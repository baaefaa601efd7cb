import { loadEarthModel, withFields, type EarthModel } from '#shared/earth/earthModel'
import { readFieldFile } from '#shared/earth/sensitivityField'

/**
 * The Earth model in the browser, the server's own: constant model and sensitivity fields. Null until the fields are here; where they
 * cannot be read, the constant model, whose default ocean then says so.
 */
export function useLiveEarth() {
  const model = shallowRef<EarthModel | null>(null)
  onMounted(async () => {
    try {
      const answer = await fetch('/earth/fields.bin')
      if (!answer.ok) throw new Error(`fields answered ${answer.status}`)
      model.value = withFields(loadEarthModel(), await readFieldFile(new Uint8Array(await answer.arrayBuffer()), ['fingerprint']))
    }
    catch {
      model.value = loadEarthModel()
    }
  })
  return model
}
