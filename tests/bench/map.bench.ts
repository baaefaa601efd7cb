import { readFileSync } from 'node:fs'
import { draftFeatures } from '../../app/map/drawing/draftFeatures'
import { draftOutline, faultOf } from '../../app/map/drawing/draftShape'
import { outlineEffect } from '../../app/map/outlineEffect'
import { regionSources, ShapeCache, type MapRegion } from '../../app/map/regionSources'
import { loadEarthModel, withFields } from '../../shared/earth/earthModel.ts'
import { readFieldFile } from '../../shared/earth/sensitivityField.ts'
import { checkOutline } from '../../shared/geo/outline.ts'
import { overlapsOf } from '../../shared/geo/overlap.ts'
import type { Position } from '../../shared/types/domain.ts'
import { fastest, type Figure } from './measure.ts'

const star = (n: number, lon: number, lat: number, radius: number): Position[] => Array.from({ length: n }, (_, k) => {
  const angle = 2 * Math.PI * k / n
  const r = radius * (1 + 0.1 * Math.sin(7 * angle))
  return [lon + r * Math.cos(angle), lat + 0.5 * r * Math.sin(angle)]
})

/** What happens on the map between two frames, and what it takes to open it. */
export async function run(): Promise<Figure[]> {
  const model = withFields(loadEarthModel(), await readFieldFile(new Uint8Array(readFileSync('public/earth/fields.bin')), ['fingerprint']))
  const ring = star(500, -40, 60, 20)
  let moves = 0
  const frame = (): void => {
    const [first, ...rest] = ring
    const draft = { rings: [[[first![0] + 0.001 * ++moves, first![1]] as Position, ...rest]], edges: 'great-circle' as const, open: false }
    const outline = draftOutline(draft)!
    const fault = faultOf(draft, outline, true)
    outlineEffect(outline, model)
    draftFeatures({ active: true, draft, chosen: null, pointer: null, outline, fault })
  }
  const regions = Array.from({ length: 200 }, (_, k): MapRegion => {
    const positions = star(200, -170 + (k % 20) * 17, -60 + Math.floor(k / 20) * 13, 8)
    return { id: `r${k}`, name: `Region ${k}`, paint: { tone: 'gain', tint: 0.3, pattern: '', figure: '+1.0 Gt/yr' }, selected: false, geometry: { type: 'Polygon', coordinates: [[...positions, positions[0]!]] } }
  })
  const large = star(199_999, 10, 10, 20)
  return [
    { name: 'one frame of dragging a vertex of 500: outline, crossings, effect, drawing', value: fastest(frame, 40), unit: 'ms', note: 'limit 4 ms' },
    { name: '200 outlines of 200 vertices made ready for the map', value: fastest(() => regionSources(regions, new ShapeCache()), 3), unit: 'ms' },
    { name: 'overlaps among 200 outlines of 200 vertices', value: fastest(() => overlapsOf(regions), 3), unit: 'ms' },
    { name: 'all checks of an outline of 200 000 vertices', value: fastest(() => checkOutline({ type: 'Polygon', coordinates: [[...large, large[0]!]] }), 2), unit: 'ms' }
  ]
}
