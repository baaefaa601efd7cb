import { onBeforeUnmount, onMounted, ref } from 'vue'
import type { Ref } from 'vue'

/**
 * Width in px of a figure's place. On the server, and until the place is measured, a default, so that server and browser
 * draw the same; the browser scales that first drawing into the place.
 */
export function useFigureWidth(place: Ref<HTMLElement | null>, fallback: number): Ref<number> {
  const width = ref(fallback)
  let observer: ResizeObserver | null = null
  onMounted(() => {
    const measure = () => {
      const measured = Math.floor(place.value?.clientWidth ?? 0)
      if (measured > 0) width.value = measured
    }
    measure()
    observer = new ResizeObserver(measure)
    if (place.value) observer.observe(place.value)
  })
  onBeforeUnmount(() => observer?.disconnect())
  return width
}
