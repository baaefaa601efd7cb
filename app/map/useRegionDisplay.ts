import type { Outline } from '#shared/types/domain'
import type { RegionItem } from '~/regions/types'
import { colouringOf, largestOf, paintOf, type Colouring } from './colouring/colouring'
import { monthPaint } from './colouring/months'
import type { MapRegion } from './regionSources'
import { useMonths } from './useMonths'

/** How the regions stand on the map: their colouring, which the address keeps, and the one that is pointed at. */
export function useRegionDisplay(regions: () => readonly RegionItem[], chosen: () => string | null, workspace: () => string | undefined) {
  const route = useRoute()
  const router = useRouter()
  const colouring = computed(() => colouringOf(route.query.colour))
  const hovered = ref<string | null>(null)
  const choose = (to: Colouring) => router.replace({ query: { ...route.query, colour: to === 'mass' ? undefined : to, month: to === 'month' ? route.query.month : undefined } })
  const months = useMonths(workspace, () => colouring.value === 'month')

  const shown = computed<MapRegion[]>(() => {
    const largest = largestOf(regions(), colouring.value)
    return regions().map(region => ({
      id: region.id, name: region.name, geometry: region.geometry as Outline, selected: region.id === chosen(),
      paint: colouring.value === 'month' ? monthPaint(months.massOf(region.id), months.largest.value) : paintOf(region, colouring.value, largest),
    }))
  })
  /** The region that changes most, which the globe is turned to at first. */
  const first = computed(() => {
    const rate = (region: RegionItem) => Math.abs(region.trend?.massGtPerYear.value ?? 0)
    return regions().toSorted((a, b) => rate(b) - rate(a))[0]?.geometry as Outline | undefined ?? null
  })
  const pointed = computed(() => regions().find(region => region.id === hovered.value) ?? null)
  return { colouring, choose, hovered, pointed, shown, first, months }
}
