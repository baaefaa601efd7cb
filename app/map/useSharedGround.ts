import { sharedGround } from '#shared/text/overlaps'
import type { Outline } from '#shared/types/domain'
import type { RegionItem } from '~/regions/types'
import type { SharedGround } from './overlapShapes'

/** Ground that regions of the map share, found once the map stands and again when outlines change. */
export function useSharedGround(regions: () => readonly RegionItem[], ready: () => boolean) {
  const grounds = shallowRef<SharedGround[]>([])
  let asked = 0
  watch(() => ready() && regions(), async (items) => {
    if (!items || items.length < 2) {
      grounds.value = []
      return
    }
    const mine = ++asked
    const { sharedGrounds } = await import('./overlapShapes')
    // After the frame that shows the regions.
    await new Promise(resolve => setTimeout(resolve, 50))
    if (mine !== asked) return
    const found = await sharedGrounds(items.map(({ id, geometry }) => ({ id, geometry: geometry as Outline })))
    if (mine === asked) grounds.value = found
  }, { immediate: true })

  const names = computed(() => new Map(regions().map(({ id, name }) => [id, name])))
  const shapes = computed(() => grounds.value.flatMap(({ shape }) => shape ?? []))
  const pairs = computed(() => grounds.value.map(ground => ({
    ...ground, words: sharedGround({ ...ground, aName: names.value.get(ground.a) ?? '', bName: names.value.get(ground.b) ?? '' }),
  })))
  return { shapes, pairs }
}
export type SharedPair = ReturnType<typeof useSharedGround>['pairs']['value'][number]
