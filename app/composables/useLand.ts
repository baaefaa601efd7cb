import { unpackLand } from '#shared/geo/landFile'
import type { Outline } from '#shared/types/domain'

/** The land that ships, fetched when it is first wanted; null until it is here, `failed` where it could not be read. */
export function useLand() {
  const land = useState<Outline | null>('land', () => shallowRef(null))
  const failed = ref(false)
  let asked: Promise<Outline | null> | null = null
  async function fetchLand(): Promise<Outline | null> {
    try {
      const answer = await fetch('/tiles/land.json')
      if (!answer.ok) throw new Error(`land answered ${answer.status}`)
      land.value = unpackLand(await answer.json())
      failed.value = false
    }
    catch {
      failed.value = true
      asked = null
    }
    return land.value
  }
  /** Asks for it, once. */
  const load = (): Promise<Outline | null> => land.value ? Promise.resolve(land.value) : asked ??= fetchLand()
  return { land, failed, load }
}
