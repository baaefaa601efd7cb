/** A frame while the map moves may take this long before the next ones are drawn coarser, milliseconds. */
const slowMs = 32
const quickMs = 22
const coarsest = 0.5
const step = 0.8

/**
 * How many dots are drawn for a pixel of the page: all of them at rest, and while the map moves as many as keep it moving. Smoothness goes
 * before sharpness under the hand; at rest the picture is sharp again.
 */
export function sharpness() {
  let moving = 1
  let last = 0
  return {
    /** To be asked once a frame; `now` in milliseconds. */
    ratio(isMoving: boolean, now: number, screen: number): number {
      if (!isMoving) {
        last = 0
        return screen
      }
      const gap = last ? now - last : 0
      last = now
      if (gap > slowMs && gap < 1000) moving = Math.max(coarsest, moving * step)
      else if (gap > 0 && gap < quickMs) moving = Math.min(1, moving / step ** 0.25)
      return moving
    },
  }
}
