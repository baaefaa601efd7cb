import type { Outline } from '#shared/types/domain'
import type { NewRegion } from '~/composables/useOutlineSave'
import type { RegionItem } from '~/regions/types'
import type { Draft } from './drawing/draft'
import type { OutlineDrawing } from './drawing/useOutlineDrawing'
import { keepOutline, keptOutline, type KeptOutline } from './keptOutline'

interface Setting {
  drawing: OutlineDrawing
  save: ReturnType<typeof useOutlineSave>
  regions: () => readonly RegionItem[]
  workspace: () => string | undefined
  blank: () => NewRegion
  /** After storing: the region as it is now. */
  stored: (region: RegionItem) => void
}

/** The outline that is being worked on, a new region's or a stored one's: kept in this browser until it is saved or given up. */
export function useOutlineWork({ drawing, save, regions, workspace, blank, stored }: Setting) {
  /** The region whose outline it is; null for a new one. */
  const region = shallowRef<{ id: string, revision: number, name: string } | null>(null)
  const form = ref<NewRegion>(blank())
  const active = computed(() => drawing.state.value !== 'idle')
  /** What was given, to be stored as it came unless it is changed. */
  const given = shallowRef<{ draft: Draft, outline: Outline } | null>(null)
  /** Left from an earlier visit, or just discarded here: can be taken up again. */
  const kept = shallowRef<KeptOutline | null>(null)
  const discarded = ref(false)

  const outline = computed(() => given.value?.draft === drawing.draft.value ? given.value.outline : drawing.outline.value)
  const changed = computed(() => active.value && (region.value === null ? drawing.vertexCount.value > 0 : given.value?.draft !== drawing.draft.value))
  const ready = computed(() => outline.value !== null && drawing.fault.value === null && (drawing.state.value === 'editing' || drawing.canFinish.value))

  const record = (): KeptOutline => ({
    version: 1, region: region.value, draft: drawing.draft.value, form: region.value ? null : form.value, at: new Date().toISOString(),
  })
  const begin = (of: RegionItem | null, take: () => void, source: Outline | null): void => {
    save.clear()
    region.value = of && { id: of.id, revision: of.revision, name: of.name }
    if (!of) form.value = blank()
    take()
    given.value = source && { draft: drawing.draft.value, outline: source }
    kept.value = null
  }
  const close = (): void => {
    drawing.close()
    save.clear()
    given.value = null
    const id = workspace()
    if (id) keepOutline(id, null)
    kept.value = null
  }

  async function store(): Promise<void> {
    drawing.finish()
    if (!outline.value) return
    const answer = region.value
      ? await save.replace(region.value, outline.value)
      : await save.create(form.value, outline.value)
    if (!answer) return
    close()
    stored(answer)
  }

  // A closed tab, an ended session or a crash loses nothing.
  let timer: ReturnType<typeof setTimeout> | undefined
  const keep = (): void => {
    const id = workspace()
    if (!id || !changed.value) return
    keepOutline(id, record())
  }
  watch([drawing.draft, form], () => {
    clearTimeout(timer)
    timer = setTimeout(keep, 300)
  }, { deep: 1 })
  onMounted(() => {
    const id = workspace()
    kept.value = id ? keptOutline(id) : null
    discarded.value = false
    window.addEventListener('pagehide', keep)
  })
  onBeforeUnmount(() => {
    clearTimeout(timer)
    keep()
    window.removeEventListener('pagehide', keep)
  })

  const overlaps = shallowRef<{ name: string, areaKm2: number, share: number }[]>([])
  let later: ReturnType<typeof setTimeout> | undefined
  watch([outline, drawing.fault, active], () => {
    clearTimeout(later)
    later = setTimeout(async () => {
      const { overlapsWith } = await import('#shared/geo/overlap')
      const shape = active.value && !drawing.fault.value ? outline.value : null
      const others = regions().filter(other => other.id !== region.value?.id)
      overlaps.value = !shape ? [] : overlapsWith({ id: 'draft', geometry: shape }, others.map(({ id, geometry }) => ({ id, geometry: geometry as Outline })))
        .map(pair => ({ name: others.find(other => other.id === pair.b)?.name ?? '', areaKm2: pair.areaKm2, share: pair.shareOfA }))
    }, 250)
  })

  return {
    active, region, form, outline, changed, ready, overlaps, kept, discarded, blank,
    draw: () => begin(null, drawing.start, null),
    edit: (item: RegionItem) => begin(item, () => drawing.edit(item.geometry as Outline), item.geometry as Outline),
    bring: (source: Outline, name: string) => {
      begin(null, () => drawing.edit(source), source)
      if (name) form.value = { ...form.value, name }
    },
    resume: () => {
      const left = kept.value
      if (!left) return
      save.clear()
      region.value = left.region
      form.value = left.form ?? blank()
      given.value = null
      drawing.resume(left.draft)
      kept.value = null
    },
    /** Drops what was left from an earlier visit. */
    forget: close,
    /** Puts the outline away; until the page is left it can be taken up again. */
    discard: () => {
      const last = changed.value && drawing.vertexCount.value > 0 ? record() : null
      close()
      kept.value = last
      discarded.value = last !== null
    },
    store,
  }
}

export type OutlineWork = ReturnType<typeof useOutlineWork>
