import { overlapsOf } from '#shared/geo/overlap'
import type { Outline } from '#shared/types/domain'

interface NamedOverlap { a: string, b: string, areaKm2: number, shareOfA: number, shareOfB: number, aName: string, bName: string }
interface Region { id: string, name: string, geometry: { type: string, coordinates: unknown[] } }

/** Ground that regions share: what the server found first, then, once the page stands, every pair that could be chosen. */
export function useRegionOverlaps(regions: () => readonly Region[], found: () => readonly NamedOverlap[]) {
  const all = shallowRef<NamedOverlap[] | null>(null)
  onMounted(() => {
    const later = window.requestIdleCallback ?? ((fn: () => void) => setTimeout(fn, 50))
    later(() => {
      const names = new Map(regions().map(region => [region.id, region.name]))
      all.value = overlapsOf(regions().map(({ id, geometry }) => ({ id, geometry: geometry as Outline })))
        .map(pair => ({ ...pair, aName: names.get(pair.a) ?? '', bName: names.get(pair.b) ?? '' }))
    })
  })
  return computed(() => all.value ?? [...found()])
}
