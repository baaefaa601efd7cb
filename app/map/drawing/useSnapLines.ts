import type { Outline } from '#shared/types/domain'
import { snapIndexOf, snapLinesOf, type SnapIndex } from './snapping'

interface Neighbour { id: string, name: string, geometry: Outline }

/** What the outline under way may snap to: the other regions' borders, and the coast once it is here. */
export function useSnapLines(setting: { active: () => boolean, regions: () => readonly Neighbour[], hidden: () => string | null }) {
  const { land, failed, load } = useLand()
  const known = new WeakMap<Outline, SnapIndex>()
  const indexOf = (outline: Outline, make: () => SnapIndex): SnapIndex => {
    const index = known.get(outline) ?? make()
    known.set(outline, index)
    return index
  }
  const indexes = computed<SnapIndex[]>(() => !setting.active() ? [] : [
    ...setting.regions().filter(region => region.id !== setting.hidden())
      .map(({ name, geometry }) => indexOf(geometry, () => snapIndexOf(snapLinesOf(geometry, 'border', name)))),
    ...land.value ? [indexOf(land.value, () => snapIndexOf(snapLinesOf(land.value!, 'coast', '')))] : [],
  ])
  watch(setting.active, (active) => {
    if (active) void load()
  })
  return { indexes, coastFailed: failed }
}
