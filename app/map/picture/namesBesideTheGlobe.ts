import type { FeatureCollection, Point } from 'geojson'
import type { Map as Chart } from 'maplibre-gl'
import type { Position } from '#shared/types/domain'
import { placeNames } from '../placeNames'
import { limbRadius, sizeOf, toScreen } from '../view'
import { layLabel, type LaidLabel } from './labelText'
import { isWithin } from './placeLabels'

interface Name { source: 'places' | 'region-labels', id: string, place: Position, label: LaidLabel }

const look = { colour: '', halo: '', haloWidth: 1.4, lineHeight: 1.25, padding: 2 }

/** Names that would run over the globe's edge are hidden as the globe turns: the layers of labels know nothing of that edge. */
export function namesBesideTheGlobe(map: Chart): { regions: (labels: FeatureCollection) => void } {
  const writer = document.createElement('canvas').getContext('2d')!
  const earth = placeNames().features.map(({ properties: { name }, geometry }): Name => ({
    source: 'places', id: name, place: geometry.coordinates as Position, label: layLabel(writer, [{ text: name, scale: 1 }], { ...look, size: 12, spacing: 0.18, widestEm: 7 }),
  }))
  let names = earth
  const hidden = new Set<string>()

  function follow(): void {
    const limb = limbRadius(map)
    const bounds = { ...sizeOf(map), limb }
    for (const { source, id, place, label: { width, height } } of names) {
      const at = limb === null ? null : toScreen(map, place)
      const isOver = at !== null && !isWithin({ x: at.x - width / 2, y: at.y - height / 2, width, height }, bounds)
      if (isOver === hidden.has(id)) continue
      if (isOver) hidden.add(id)
      else hidden.delete(id)
      map.setFeatureState({ source, id }, { beside: isOver })
    }
  }

  map.on('move', follow)
  map.on('projectiontransition', follow)
  follow()
  return {
    regions: ({ features }) => {
      names = [...earth, ...features.map(({ properties, geometry }): Name => ({
        source: 'region-labels', id: String(properties!.id), place: (geometry as Point).coordinates as Position,
        label: layLabel(writer, [{ text: String(properties!.name), scale: 1 }], { ...look, size: 12.5, spacing: 0, widestEm: 11 }),
      }))]
      follow()
    },
  }
}
