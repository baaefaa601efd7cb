import type { Feature, FeatureCollection } from 'geojson'
import { contourOf } from '#shared/earth/contour'
import { formatSigned } from '#shared/format/numbers'
import type { Outline, Position, RegionKind } from '#shared/types/domain'
import { displayShape, type DisplayShape } from './displayShape'

/** A region as the map shows it. */
export interface MapRegion {
  id: string
  name: string
  kind: RegionKind
  geometry: Outline
  /** Its sign makes the region warm and hatched (loss) or cool and plain (gain); null draws ink alone. */
  massTrendGtPerYear: number | null
  /** The trend's uncertainty leaves its sign open: drawn in ink. */
  open?: boolean
  selected: boolean
}

export type Sign = 'loss' | 'gain' | 'none'

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

export function signOf({ massTrendGtPerYear, open }: Pick<MapRegion, 'massTrendGtPerYear' | 'open'>): Sign {
  if (!massTrendGtPerYear || open) return 'none'
  return massTrendGtPerYear < 0 ? 'loss' : 'gain'
}

/** Fills, lines and labels of the regions; `hidden` is left out because it is being edited. */
export function regionSources(regions: readonly MapRegion[], cache: ShapeCache, hidden: string | null = null): Record<'fills' | 'lines' | 'labels', FeatureCollection> {
  const fills: Feature[] = []
  const lines: Feature[] = []
  const labels: Feature[] = []
  for (const region of regions) {
    if (region.id === hidden) continue
    const { shape, centroid, areaM2 } = cache.of(region.geometry)
    const properties = { id: region.id, sign: signOf(region), selected: region.selected }
    fills.push({ type: 'Feature', properties, geometry: shape.fill })
    lines.push({ type: 'Feature', properties, geometry: { type: 'MultiLineString', coordinates: shape.lines } })
    labels.push({
      type: 'Feature',
      properties: { ...properties, name: region.name, trend: trendLabel(region.massTrendGtPerYear), rank: region.selected ? -1e9 : -areaM2 / 1e6 },
      geometry: { type: 'Point', coordinates: centroid }
    })
  }
  return { fills: collection(fills), lines: collection(lines), labels: collection(labels) }
}

function trendLabel(massTrendGtPerYear: number | null): string {
  if (massTrendGtPerYear === null) return ''
  const digits = Math.abs(massTrendGtPerYear) < 10 ? 1 : 0
  return `${formatSigned(massTrendGtPerYear, digits)}\u00A0Gt/yr`
}

export function collection(features: Feature[]): FeatureCollection {
  return { type: 'FeatureCollection', features }
}
