import { contourOf } from '#shared/earth/contour'
import type { OutlineOverlap } from '#shared/geo/overlap'
import { polygonsOf } from '#shared/geo/parts'
import type { NamedOutline } from '#shared/geo/outline'
import type { Outline, RegionKind } from '#shared/types/domain'

/** One outline of a file with several, on its way to become a region. */
export interface BroughtRow {
  key: string
  name: string
  kind: RegionKind
  ticked: boolean
  geometry: Outline
  attributes: Record<string, string>
  areaKm2: number
  vertices: number
}

const longestName = 120

export function broughtRows(outlines: readonly NamedOutline[], kind: RegionKind, taken: readonly string[]): BroughtRow[] {
  const names = distinctNames(outlines.map(outline => outline.name ?? ''), taken)
  return outlines.map(({ geometry, attributes = {} }, k) => ({
    key: `brought-${k}`, name: names[k]!, kind, ticked: true, geometry, attributes,
    areaKm2: contourOf(geometry).areaM2 / 1e6,
    vertices: polygonsOf(geometry).flat().reduce((sum, ring) => sum + ring.length - 1, 0),
  }))
}

/** Attributes that could give names: those that most outlines have, each with an example. */
export function nameAttributes(outlines: readonly NamedOutline[]): { key: string, example: string }[] {
  const counts = new Map<string, { count: number, example: string }>()
  for (const { attributes = {} } of outlines) {
    for (const [key, example] of Object.entries(attributes)) {
      const known = counts.get(key)
      if (known) known.count++
      else counts.set(key, { count: 1, example })
    }
  }
  return [...counts].filter(([, { count }]) => count * 2 > outlines.length).map(([key, { example }]) => ({ key, example }))
}

/** The names, numbered where one is empty, comes twice or is a region's already: “Bruma (2)”. */
export function distinctNames(names: readonly string[], taken: readonly string[]): string[] {
  const used = new Set(taken.map(folded))
  return names.map((given, k) => {
    const base = given.trim() || `Outline ${k + 1}`
    let name = base.slice(0, longestName)
    for (let n = 2; used.has(folded(name)); n++) {
      const number = ` (${n})`
      name = `${base.slice(0, longestName - number.length)}${number}`
    }
    used.add(folded(name))
    return name
  })
}

/** What keeps a row from being stored: its name is empty or not its own. Null where nothing does. */
export function nameFault(row: BroughtRow, rows: readonly BroughtRow[], taken: readonly string[]): string | null {
  const name = folded(row.name)
  if (!name) return 'It needs a name.'
  if (taken.some(other => folded(other) === name)) return 'A region has this name already.'
  return rows.some(other => other !== row && other.ticked && folded(other.name) === name) ? 'Another outline here has this name.' : null
}

export const folded = (name: string) => name.trim().toLocaleLowerCase('en')

/** Ground that each row shares with others here and with regions, by row. Rests now and then, so that the page goes on answering; `ended` stops it. */
export async function groundShared(rows: readonly BroughtRow[], regions: readonly { id: string, geometry: Outline }[], ended: () => boolean): Promise<Map<string, OutlineOverlap[]>> {
  const { overlapsInTurn } = await import('#shared/geo/overlap')
  const found = new Map<string, OutlineOverlap[]>()
  const add = (key: string, overlap: OutlineOverlap) => found.set(key, [...found.get(key) ?? [], overlap])
  const items = [...rows.map(({ key, geometry }) => ({ id: key, geometry })), ...regions]
  let rested = performance.now()
  for (const overlaps of overlapsInTurn(items, rows.length)) {
    for (const overlap of overlaps) {
      add(overlap.a, overlap)
      add(overlap.b, { ...overlap, a: overlap.b, b: overlap.a, shareOfA: overlap.shareOfB, shareOfB: overlap.shareOfA })
    }
    if (performance.now() - rested < 12) continue
    await new Promise(done => setTimeout(done))
    if (ended()) break
    rested = performance.now()
  }
  return found
}
