import { contourOf } from '#shared/earth/contour'
import type { Outline } from '#shared/types/domain'
import { InputError } from '#shared/types/issue'
import { vertexCount, type Draft } from './drawing/draft'
import { draftOutline, faultOf } from './drawing/draftShape'
import { draftOf } from './drawing/recover'
import type { OutlineDrawing } from './drawing/useOutlineDrawing'

export type OutlineOperation = 'land' | 'sea' | 'subtract' | 'simplify'

/** What an operation makes, beside what there was. */
export interface OutlineChange { areaKm2: number, wasKm2: number, vertices: number, hadVertices: number, fault: string | null }

/** Whole-outline operations: shown on the map and in figures before they are taken, and each one step that can be undone. */
export function useOutlineOperations(drawing: OutlineDrawing, regions: () => readonly { id: string, geometry: unknown }[]) {
  const { load } = useLand()
  const kind = ref<OutlineOperation | null>(null)
  const neighbour = ref('')
  const toleranceKm = ref(10)
  const busy = ref(false)
  const problem = ref('')
  const change = shallowRef<OutlineChange | null>(null)
  let turn = 0

  async function make(base: Draft): Promise<Draft | string> {
    if (kind.value === 'simplify') {
      const { simplifyRing } = await import('#shared/geo/simplify')
      return { ...base, rings: base.rings.map(ring => simplifyRing(ring, toleranceKm.value)) }
    }
    const outline = draftOutline(base)
    if (!outline) return 'The outline encloses no area.'
    const { insideOf, outsideOf } = await import('#shared/geo/combine')
    if (kind.value === 'subtract') {
      const other = regions().find(region => region.id === neighbour.value)
      if (!other) return ''
      const rest = outsideOf(outline, other.geometry as Outline)
      return rest ? draftOf(rest) : 'The other region covers all of this outline: nothing would be left.'
    }
    const land = await load()
    if (!land) return 'The coast could not be read. Check the connection and try again.'
    const rest = kind.value === 'land' ? insideOf(outline, land) : outsideOf(outline, land)
    return rest ? draftOf(rest) : kind.value === 'land' ? 'No part of the outline is land.' : 'No part of the outline is sea.'
  }

  async function compute(): Promise<void> {
    const mine = ++turn
    change.value = null
    problem.value = ''
    if (kind.value === null) return
    busy.value = true
    const base = drawing.present.value
    // The page shows that it works before it does.
    await new Promise(resolve => setTimeout(resolve))
    const made = await make(base).catch(error => error instanceof InputError ? error.message : Promise.reject(error as Error))
    if (mine !== turn) return
    busy.value = false
    if (typeof made === 'string') {
      problem.value = made
      drawing.show(null)
      return
    }
    const [was, is] = [draftOutline(base), draftOutline(made)]
    change.value = {
      wasKm2: was ? contourOf(was).areaM2 / 1e6 : 0, areaKm2: is ? contourOf(is).areaM2 / 1e6 : 0,
      hadVertices: vertexCount(base), vertices: vertexCount(made), fault: faultOf(made, is)?.message ?? null,
    }
    drawing.show(made)
  }

  const close = (): void => {
    turn++
    kind.value = null
    busy.value = false
    change.value = null
    problem.value = ''
    drawing.show(null)
  }
  watch([kind, neighbour, toleranceKm], compute)
  // Going on with the outline takes what is shown; undo and Escape put it away.
  watch(drawing.previewing, (shown) => {
    if (!shown && change.value) close()
  })
  return {
    kind, neighbour, toleranceKm, busy, problem, change, close,
    accept: () => {
      drawing.accept()
      close()
    },
  }
}
