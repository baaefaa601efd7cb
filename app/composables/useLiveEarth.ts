import type { EarthModel } from '#shared/earth/earthModel'
import type { OceanMode } from '#shared/types/domain'

/**
 * The Earth model in the browser, the server's own: constant model and sensitivity fields, fetched when they are first wanted, with the chosen
 * response of the ocean as its default. Null until what is needed is here; where the fields cannot be read, the constant model, whose
 * default ocean then says so. The fields with rotational feedback take as much memory again, so they are unpacked only when chosen.
 */
export function useLiveEarth(wanted: () => boolean, ocean: () => OceanMode | null) {
  const read = shallowRef<EarthModel | null>(null)
  const model = computed(() => read.value && withOcean(read.value, ocean()))
  const needsFeedback = () => ocean() === 'fingerprint-rotation'
  let asked: Promise<unknown> | null = null
  let withFeedback = false
  /** Asks for it, once; null where not even its code arrives, and the next time that it is wanted asks again. */
  async function load(): Promise<EarthModel | null> {
    if (!asked || (needsFeedback() && !withFeedback)) {
      withFeedback ||= needsFeedback()
      asked = readEarth(withFeedback).then(found => read.value = found).catch(() => asked = null)
    }
    await asked
    return model.value
  }
  onMounted(() => watch(() => wanted() && (needsFeedback() ? 'feedback' : 'plain'), now => now && void load(), { immediate: true }))
  return { model, load }
}

async function readEarth(withFeedback: boolean): Promise<EarthModel> {
  const [{ loadEarthModel, withFields }, { readFieldFile }, answer] = await Promise.all([
    import('#shared/earth/earthModel'), import('#shared/earth/sensitivityField'), fetch('/earth/fields.bin').catch(() => null),
  ])
  try {
    if (!answer?.ok) throw new Error(`fields answered ${answer?.status}`)
    const fields = await readFieldFile(new Uint8Array(await answer.arrayBuffer()), withFeedback ? ['fingerprint', 'fingerprint-rotation'] : ['fingerprint'])
    return withFields(loadEarthModel(), fields)
  }
  catch {
    return loadEarthModel()
  }
}

/** The model with another default ocean; null while the fields that it needs are on their way, and as it is where there are none. */
export function withOcean(model: EarthModel, ocean: OceanMode | null): EarthModel | null {
  if (!ocean || ocean === model.defaultOcean) return model
  if (ocean === 'none' || ocean === 'uniform') return { ...model, defaultOcean: ocean }
  if (!model.fields) return model
  return model.fields.stacks[ocean] ? { ...model, defaultOcean: ocean } : null
}
