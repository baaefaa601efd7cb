import { computed, onScopeDispose, ref, shallowRef, watch, type Ref } from 'vue'
import type { Map as Chart } from 'maplibre-gl'
import type { EarthModel } from '#shared/earth/earthModel'
import type { Position } from '#shared/types/domain'
import type { MapPicture } from '../picture/picture'
import { toPlace } from '../view'
import { effectOf, overlayOf, type Overlay } from './overlay'
import type { SensitivityGrid } from './sensitivityGrid'

interface Setting {
  chart: Readonly<Ref<Chart | null>>
  picture: Readonly<Ref<MapPicture | null>>
  model: Readonly<Ref<EarthModel | null>>
  /** Place of the keyboard cursor of drawing; it goes before the pointer. */
  cursor: Readonly<Ref<Position | null>>
}

/**
 * Lines of equal effect of a gigatonne on the map, chosen in the address (`overlay`, `towards`), and the effect under the pointer, under
 * the cursor of drawing, or in the middle of the map while it has the keyboard.
 */
export function useSensitivityOverlay({ chart, picture, model, cursor }: Setting) {
  const route = useRoute()
  const router = useRouter()
  const sums = shallowRef<typeof import('./fieldAndLines') | null>(null)
  const failed = ref(false)
  const grid = shallowRef<SensitivityGrid | null>(null)
  /** While the longitude is turned, ahead of the address. */
  const turned = ref<number | null>(null)
  const overlay = computed<Overlay | null>(() => {
    const chosen = overlayOf(route.query.overlay, route.query.towards)
    return chosen?.kind === 'pole' && turned.value !== null ? { ...chosen, towardsDeg: turned.value } : chosen
  })
  const wanted = computed(() => overlay.value !== null && model.value !== null)

  async function compute(): Promise<void> {
    if (!wanted.value || !import.meta.client) return
    const of = model.value!
    grid.value = null
    failed.value = false
    sums.value ??= await import('./fieldAndLines').catch(() => null)
    if (!sums.value) {
      failed.value = true
      return
    }
    const made = await sums.value.sensitivityGrid(of, () => new Promise(resolve => setTimeout(resolve)))
    if (model.value === of) grid.value = made
  }
  watch([wanted, model], compute, { immediate: true })

  const lines = computed(() => overlay.value && grid.value && sums.value ? sums.value.sensitivityLines(grid.value, overlay.value) : null)
  // One drawing a frame while the longitude is turned.
  let frame = 0
  const draw = () => {
    frame = 0
    if (sums.value) picture.value?.set('overlay-lines', sums.value.lineFeatures(lines.value?.middle ?? []))
  }
  watch([lines, picture], () => {
    if (picture.value) frame ||= requestAnimationFrame(draw)
  }, { immediate: import.meta.client })

  const pointer = shallowRef<Position | null>(null)
  const middle = shallowRef<Position | null>(null)
  const place = computed(() => cursor.value ?? pointer.value ?? middle.value)
  const effect = computed(() => {
    if (!overlay.value || !model.value || !place.value || !sums.value) return null
    const { responseAtPlace, mapSettings } = sums.value
    return effectOf(overlay.value, responseAtPlace(place.value[0], place.value[1], model.value, mapSettings(model.value)))
  })
  watch(chart, (map, _, onCleanup) => {
    if (!map) return
    const canvas = map.getCanvas()
    const centre = () => {
      const { lng, lat } = map.getCenter()
      middle.value = canvas.matches(':focus-visible') ? [lng - 360 * Math.floor((lng + 180) / 360), lat] : null
    }
    const move = (event: { point: { x: number, y: number } }) => { pointer.value = toPlace(map, event.point) }
    const leave = () => { pointer.value = null }
    map.on('mousemove', move)
    map.on('mouseout', leave)
    map.on('move', centre)
    canvas.addEventListener('focus', centre)
    canvas.addEventListener('blur', centre)
    canvas.addEventListener('keydown', leave)
    onCleanup(() => {
      canvas.removeEventListener('focus', centre)
      canvas.removeEventListener('blur', centre)
      canvas.removeEventListener('keydown', leave)
    })
  }, { immediate: true })

  const go = (query: { overlay?: string, towards?: string }) => router.replace({ query: { ...route.query, ...query } })
  let later: ReturnType<typeof setTimeout> | undefined
  onScopeDispose(() => {
    clearTimeout(later)
    cancelAnimationFrame(frame)
  })

  return {
    overlay, lines, place, effect,
    /** The middle of the map is what the keyboard reads. */
    byKeys: computed(() => overlay.value !== null && !cursor.value && !pointer.value && middle.value !== null),
    ocean: computed(() => model.value?.defaultOcean ?? null),
    /** What computes the lines did not arrive; `again` asks once more. */
    failed,
    again: compute,
    choose: (kind: Overlay['kind'] | null) => {
      turned.value = null
      return go({ overlay: kind ?? undefined, towards: undefined })
    },
    turn: (degrees: number) => {
      turned.value = degrees
      clearTimeout(later)
      later = setTimeout(async () => {
        await go({ towards: String(degrees) })
        if (turned.value === degrees) turned.value = null
      }, 250)
    },
  }
}

export type SensitivityOverlay = ReturnType<typeof useSensitivityOverlay>
