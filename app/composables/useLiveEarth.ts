import type { EarthModel } from '#shared/earth/earthModel'

/**
 * The Earth model in the browser, the server's own: constant model and sensitivity fields, fetched when they are first wanted. Null until
 * the fields are here; where they cannot be read, the constant model, whose default ocean then says so.
 */
export function useLiveEarth(wanted: () => boolean) {
  const model = shallowRef<EarthModel | null>(null)
  let asked: Promise<EarthModel | null> | null = null
  async function read(): Promise<EarthModel> {
    const [{ loadEarthModel, withFields }, { readFieldFile }, answer] = await Promise.all([
      import('#shared/earth/earthModel'), import('#shared/earth/sensitivityField'), fetch('/earth/fields.bin').catch(() => null),
    ])
    try {
      if (!answer?.ok) throw new Error(`fields answered ${answer?.status}`)
      return withFields(loadEarthModel(), await readFieldFile(new Uint8Array(await answer.arrayBuffer()), ['fingerprint']))
    }
    catch {
      return loadEarthModel()
    }
  }
  /** Asks for it, once; null where not even its code arrives, and the next time that it is wanted asks again. */
  const load = (): Promise<EarthModel | null> => asked ??= read().then(found => model.value = found).catch(() => asked = null)
  onMounted(() => watch(wanted, now => now && void load(), { immediate: true }))
  return { model, load }
}
