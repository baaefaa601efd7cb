import { geoAzimuthalEqualArea, geoEqualEarth } from 'd3-geo'
import type { GeoProjection } from 'd3-geo'
import type { Box } from '../svg.ts'

/** One drawing of the Earth: the whole of it, or the ground around a pole. */
export interface MapView {
  kind: 'world' | 'north' | 'south'
  projection: GeoProjection
  box: Box
}

/** Ground of a polar inset, degrees from the pole. */
const insetAngle = 42

function world(box: Box): MapView {
  const projection = geoEqualEarth().precision(0.3).fitExtent([[box.x + 1, box.y + 1], [box.x + box.width - 1, box.y + box.height - 1]], { type: 'Sphere' })
  return { kind: 'world', projection, box }
}

/** North: 0° to the right and 90° E up, as on the pole plane. South: 0° up and 90° E to the right. */
function inset(kind: 'north' | 'south', box: Box): MapView {
  const radius = Math.min(box.width, box.height) / 2 - 1
  const projection = geoAzimuthalEqualArea()
    .rotate(kind === 'north' ? [90, -90] : [0, 90])
    .clipAngle(insetAngle)
    .precision(0.3)
    .translate([box.x + box.width / 2, box.y + box.height / 2])
    .scale(radius / (2 * Math.sin(insetAngle * Math.PI / 360)))
  return { kind, projection, box }
}

/** The world with the polar insets that are asked for: beside it on a wide drawing, below it on a narrow one. */
export function mapViews(width: number, insets: { north: boolean, south: boolean }): { views: MapView[], height: number } {
  const kinds = (['north', 'south'] as const).filter(kind => insets[kind])
  const aspect = 0.487
  if (kinds.length === 0) {
    const height = Math.round(width * aspect)
    return { views: [world({ x: 0, y: 0, width, height })], height }
  }
  if (width >= 620) {
    const gap = 16
    // Two insets stand over one another.
    const side = Math.floor((width - gap) * (kinds.length === 2 && width > 900 ? 0.22 : 0.27))
    const mapWidth = width - gap - side
    const height = Math.max(Math.round(mapWidth * aspect), side * kinds.length)
    const mapHeight = Math.round(mapWidth * aspect)
    return {
      height,
      views: [
        world({ x: 0, y: Math.round((height - mapHeight) / 2), width: mapWidth, height: mapHeight }),
        ...kinds.map((kind, i) => inset(kind, { x: mapWidth + gap, y: kinds.length === 2 ? i * side : Math.round((height - side) / 2), width: side, height: side })),
      ],
    }
  }
  const mapHeight = Math.round(width * aspect)
  const side = Math.min(Math.floor((width - 12) / 2), 260)
  const left = (width - kinds.length * side - (kinds.length - 1) * 12) / 2
  return {
    height: mapHeight + 12 + side,
    views: [
      world({ x: 0, y: 0, width, height: mapHeight }),
      ...kinds.map((kind, i) => inset(kind, { x: left + i * (side + 12), y: mapHeight + 12, width: side, height: side })),
    ],
  }
}
