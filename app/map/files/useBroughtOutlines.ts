import type { FaultyOutline } from '#shared/geo/outline'
import type { OutlineOverlap } from '#shared/geo/overlap'
import type { Outline, RegionKind } from '#shared/types/domain'
import type { RegionItem } from '~/regions/types'
import type { MapRegion } from '../regionSources'
import type { ReadOutlines } from '../readPasted'
import { broughtRows, distinctNames, folded, groundShared, nameAttributes, nameFault, type BroughtRow } from './broughtRows'

interface Setting {
  regions: () => readonly RegionItem[]
  workspace: () => string | undefined
  blank: () => { kind: RegionKind, agencyId: string }
  /** After storing or undoing: the account as it is now. */
  changed: () => Promise<void>
}

/** The outlines of a file with several: named, ticked, and stored in one go or not at all. */
export function useBroughtOutlines({ regions, workspace, blank, changed }: Setting) {
  const api = useApi()
  const rows = ref<BroughtRow[]>([])
  const faulty = shallowRef<FaultyOutline[]>([])
  const leftOut = ref(0)
  const attributes = shallowRef<{ key: string, example: string }[]>([])
  const agencyId = ref('')
  const shared = shallowRef<Map<string, OutlineOverlap[]>>(new Map())
  const comparing = ref(false)
  const busy = ref(false)
  const error = shallowRef<unknown>(null)
  /** What was stored last, as long as it can be undone here. */
  const stored = shallowRef<{ id: string, revision: number, name: string }[]>([])

  const taken = () => regions().map(region => region.name)
  const ticked = computed(() => rows.value.filter(row => row.ticked))
  const faults = computed(() => {
    const present = new Set(taken().map(folded))
    const count = new Map<string, number>()
    for (const row of ticked.value) count.set(folded(row.name), (count.get(folded(row.name)) ?? 0) + 1)
    // Only names that occur twice are looked at closely: a list of 500 stays quick.
    return new Map(ticked.value.filter(row => !row.name.trim() || present.has(folded(row.name)) || count.get(folded(row.name))! > 1)
      .map(row => [row.key, nameFault(row, rows.value, taken())]))
  })

  async function compare() {
    const mine = rows.value
    shared.value = new Map()
    comparing.value = true
    const found = await groundShared(mine, regions().map(({ id, geometry }) => ({ id, geometry: geometry as Outline })), () => rows.value !== mine)
    if (rows.value !== mine) return
    shared.value = found
    comparing.value = false
  }

  function take(found: ReadOutlines) {
    const { kind, agencyId: agency } = blank()
    rows.value = broughtRows(found.outlines, kind, taken()).map(row => ({ ...row, geometry: markRaw(row.geometry) }))
    faulty.value = found.faulty
    leftOut.value = found.leftOut
    attributes.value = nameAttributes(found.outlines)
    agencyId.value = agency
    error.value = null
    stored.value = []
    void compare()
  }
  function nameFrom(key: string) {
    const names = distinctNames(rows.value.map(row => row.attributes[key] ?? ''), taken())
    rows.value.forEach((row, k) => { row.name = names[k]! })
  }
  function close() {
    rows.value = []
    faulty.value = []
    error.value = null
    shared.value = new Map()
  }

  async function attempt(work: (workspace: string) => Promise<void>) {
    const id = workspace()
    if (!id || busy.value) return
    busy.value = true
    error.value = null
    try {
      await work(id)
    }
    catch (caught) {
      error.value = caught
    }
    finally {
      busy.value = false
    }
  }
  const store = () => attempt(async (id) => {
    const { items } = await api('regionCreateMany', {
      params: { workspace: id },
      body: { agencyId: agencyId.value, regions: ticked.value.map(({ name, kind, geometry }) => ({ name: name.trim(), kind, note: '', geometry })) },
    })
    close()
    stored.value = items
    await changed()
  })
  const undo = () => attempt(async (id) => {
    await api('regionRemoveMany', { params: { workspace: id }, body: { regions: stored.value.map(({ id: region, revision }) => ({ id: region, revision })) } })
    stored.value = []
    await changed()
  })

  return {
    rows, faulty, leftOut, attributes, agencyId, shared, comparing, busy, error, stored, ticked, faults,
    active: computed(() => rows.value.length > 0),
    /** As the map shows them: what is ticked stands out. */
    shapes: computed<MapRegion[]>(() => rows.value.map(row => ({
      id: row.key, name: row.name, geometry: row.geometry as Outline, selected: row.ticked, paint: { tone: 'ink', tint: 0.1, pattern: '', figure: '' },
    }))),
    take, nameFrom, close, store, undo,
    toggle: (key: string) => {
      const row = rows.value.find(candidate => candidate.key === key)
      if (row) row.ticked = !row.ticked
    },
    tickAll: (on: boolean) => { for (const row of rows.value) row.ticked = on },
    kindOfAll: (kind: RegionKind) => { for (const row of rows.value) row.kind = kind },
    forget: () => { stored.value = [] },
  }
}

export type BroughtOutlines = ReturnType<typeof useBroughtOutlines>
