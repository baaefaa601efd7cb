import type { GeoJSONSource, Map as Chart, StyleSpecification } from 'maplibre-gl'
import type { Palette } from '#shared/design/tokens'
import { mapImages } from '../colouring/images'
import { mapLayers, mapStyle, type MapProjection } from '../mapStyle'
import { namesBesideTheGlobe } from './namesBesideTheGlobe'
import type { MapPicture } from './picture'

export function webglStyle(palette: Palette, projection: MapProjection): StyleSpecification {
  return mapStyle(palette, projection, location.origin)
}

/** Gives a map its patterns as soon as its style asks for them. */
export function giveImages(map: Chart, palette: Palette): void {
  map.on('style.load', () => {
    for (const [name, image] of mapImages(palette)) if (!map.hasImage(name)) map.addImage(name, image, { pixelRatio: 2 })
  })
}

/** The layers of a map that stands. */
export function webglPicture(map: Chart): MapPicture {
  let hovered: string | null = null
  const mark = (id: string | null, on: boolean): void => {
    if (id) map.setFeatureState({ source: 'region-lines', id }, { hovered: on })
  }
  const beside = namesBesideTheGlobe(map)
  return {
    painter: 'webgl',
    set: (source, data) => {
      (map.getSource(source) as GeoJSONSource | undefined)?.setData(data)
      if (source === 'region-labels') beside.regions(data)
    },
    hover: (id) => {
      mark(hovered, false)
      mark(id, true)
      hovered = id
    },
    repaint: palette => repaint(map, palette),
    regionAt: ({ x, y }) => (map.queryRenderedFeatures([x, y], { layers: ['region-fill', 'region-label'] })[0]?.properties.id as string | undefined) ?? null,
  }
}

function repaint(map: Chart, palette: Palette): void {
  for (const [name, image] of mapImages(palette)) map.updateImage(name, image)
  for (const layer of mapLayers(palette)) {
    for (const [name, value] of Object.entries(layer.paint ?? {})) {
      map.setPaintProperty(layer.id, name as never, value as never)
    }
  }
}
