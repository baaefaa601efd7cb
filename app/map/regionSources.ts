import type { Feature, FeatureCollection } from 'geojson'
import { contourOf } from '#shared/earth/contour'
import type { Outline, Position } from '#shared/types/domain'
import type { RegionPaint } from './colouring/colouring'
import { displayShape, type DisplayShape } from './displayShape'

/** A region as the map shows it. */
export interface MapRegion {
  id: string
  name: string
  geometry: Outline
  paint: RegionPaint
  selected: boolean
}

interface Drawn { shape: DisplayShape, centroid: Position, areaM2: number }

/** Keeps what is costly to draw of each outline, by the outline object itself. */
export class ShapeCache {
  private readonly drawn = new WeakMap<Outline, Drawn>()

  of(outline: Outline): Drawn {
    const known = this.drawn.get(outline)
    if (known) return known
    const { centroid, areaM2 } = contourOf(outline)
    const fresh = { shape: displayShape(outline), centroid, areaM2 }
    this.drawn.set(outline, fresh)
    return fresh
  }
}

/** Fills, lines and labels of the regions; `hidden` is left out because it is being edited. */
export function regionSources(regions: readonly MapRegion[], cache: ShapeCache, hidden: string | null = null): Record<'fills' | 'lines' | 'labels', FeatureCollection> {
  const fills: Feature[] = []
  const lines: Feature[] = []
  const labels: Feature[] = []
  for (const region of regions) {
    if (region.id === hidden) continue
    const { shape, centroid, areaM2 } = cache.of(region.geometry)
    const { tone, tint, pattern, figure } = region.paint
    const properties = { id: region.id, tone, tint, pattern, selected: region.selected }
    fills.push({ type: 'Feature', properties, geometry: shape.fill })
    lines.push({ type: 'Feature', properties, geometry: { type: 'MultiLineString', coordinates: shape.lines } })
    labels.push({
      type: 'Feature',
      properties: { ...properties, name: region.name, figure, rank: region.selected ? -1e9 : -areaM2 / 1e6 },
      geometry: { type: 'Point', coordinates: centroid }
    })
  }
  return { fills: collection(fills), lines: collection(lines), labels: collection(labels) }
}

export function collection(features: Feature[]): FeatureCollection {
  return { type: 'FeatureCollection', features }
}
