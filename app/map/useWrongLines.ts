import { linesOf } from '#shared/geo/faultPlace'
import type { Outline, Position } from '#shared/types/domain'
import type { BroughtOutlines } from './files/useBroughtOutlines'

interface Setting {
  bringing: () => boolean
  brought: BroughtOutlines
  save: ReturnType<typeof useOutlineSave>
  show: (outlines: readonly Outline[]) => void
}

/** What is wrong with outlines that the map does not hold: brought ones that cannot be read or taken, and one that the server refuses. */
export function useWrongLines({ bringing, brought, save, show }: Setting) {
  const unread = shallowRef<Position[][]>([])
  const look = (lines: Position[][]): void => {
    if (lines.length > 0) show([{ type: 'Polygon', coordinates: lines }])
  }
  const lines = computed(() => {
    if (bringing()) return unread.value
    if (brought.active.value) return brought.faulty.value.flatMap(item => linesOf(item.issues))
    return save.error.value instanceof ApiProblem ? linesOf(save.error.value.issues) : []
  })
  return {
    lines, look,
    /** What the reader of files and texts found wrong, shown at once. */
    found: (wrong: Position[][]): void => {
      unread.value = wrong
      look(wrong)
    },
  }
}
