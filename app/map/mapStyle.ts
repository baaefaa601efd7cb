import type { ExpressionSpecification, LayerSpecification, StyleSpecification } from 'maplibre-gl'
import type { Palette } from '#shared/design/tokens'
import { graticule } from './graticule'
import { overlapHatch } from './colouring/images'
import { sourceIds } from './picture/picture'
import { placeNames } from './placeNames'
import { collection } from './regionSources'

export type MapProjection = 'globe' | 'flat'

/** The whole style: shipped tiles, graticule, regions and the outline being drawn. No glyphs: labels come from local Noto Sans. */
export function mapStyle(palette: Palette, projection: MapProjection, origin: string): StyleSpecification {
  return {
    version: 8,
    projection: { type: projection === 'globe' ? 'globe' : 'mercator' },
    sources: {
      earth: { type: 'vector', tiles: [`${origin}/tiles/{z}/{x}/{y}.pbf`], minzoom: 0, maxzoom: 5 },
      graticule: { type: 'geojson', data: graticule() },
      places: { type: 'geojson', data: placeNames(), promoteId: 'name' },
      ...Object.fromEntries(sourceIds.map(id => [id, { type: 'geojson' as const, data: collection([]), tolerance: 0.2, promoteId: 'id' }]))
    },
    layers: mapLayers(palette)
  }
}

/** Layers from the ground up. A change of theme sets their paint anew. */
export function mapLayers(palette: Palette): LayerSpecification[] {
  return [...groundLayers(palette), ...nameLayers(palette), ...overlayLayers(palette), ...regionLayers(palette), ...draftLayers(palette)]
}

function groundLayers(palette: Palette): LayerSpecification[] {
  return [
    { id: 'sea', type: 'background', paint: { 'background-color': palette.sea } },
    { 'id': 'land', 'type': 'fill', 'source': 'earth', 'source-layer': 'land', 'paint': { 'fill-color': palette.land, 'fill-antialias': false } },
    {
      'id': 'coast', 'type': 'line', 'source': 'earth', 'source-layer': 'coast',
      'paint': { 'line-color': palette.soft, 'line-width': 0.5, 'line-opacity': 0.6 }
    },
    { id: 'graticule', type: 'line', source: 'graticule', paint: { 'line-color': palette.soft, 'line-width': 0.5, 'line-opacity': 0.3 } }
  ]
}

/** Names that would run over the globe's edge are hidden (namesBesideTheGlobe.ts). */
const insideEdge: ExpressionSpecification = ['case', ['boolean', ['feature-state', 'beside'], false], 0, 1]

/** Names of the Earth, softer than those of the regions and giving way to every other label. */
function nameLayers(palette: Palette): LayerSpecification[] {
  const kind: ExpressionSpecification = ['get', 'kind']
  return [{
    id: 'place-name', type: 'symbol', source: 'places', filter: ['>=', ['zoom'], ['get', 'from']],
    layout: {
      'text-field': ['get', 'name'],
      'text-font': ['Noto Sans'],
      'text-size': ['match', kind, 'ocean', 12, 'continent', 12, 'river', 10, 11],
      'text-letter-spacing': ['match', kind, 'ocean', 0.18, 'continent', 0.18, 'sea', 0.08, 0.02],
      'text-max-width': 7,
      'text-padding': 6,
      'symbol-sort-key': ['get', 'rank']
    },
    paint: {
      'text-color': palette.soft,
      'text-opacity': insideEdge,
      'text-halo-color': ['match', kind, ['ocean', 'sea', 'lake'], palette.sea, palette.land],
      'text-halo-width': 1.2
    }
  }]
}

/** Lines of equal effect: solid above zero, dashed below, heavy at zero. Their labels give way to those of the regions. */
function overlayLayers(palette: Palette): LayerSpecification[] {
  const line = (id: string, sign: number, paint: object): LayerSpecification => ({
    id, type: 'line', source: 'overlay-lines', filter: ['==', ['get', 'sign'], sign], layout: { 'line-join': 'round' },
    paint: { 'line-color': palette.ink, ...paint }
  })
  return [
    line('overlay-above', 1, { 'line-width': 0.9, 'line-opacity': 0.7 }),
    line('overlay-below', -1, { 'line-width': 0.9, 'line-opacity': 0.7, 'line-dasharray': [5, 3] }),
    line('overlay-zero', 0, { 'line-width': 2, 'line-opacity': 0.85 }),
    {
      id: 'overlay-label', type: 'symbol', source: 'overlay-lines',
      layout: {
        'symbol-placement': 'line',
        'symbol-spacing': 420,
        'text-field': ['get', 'text'],
        'text-font': ['Noto Sans'],
        'text-size': 11.5,
        'text-padding': 6,
        'text-rotation-alignment': 'viewport',
        'text-pitch-alignment': 'viewport'
      },
      paint: { 'text-color': palette.ink, 'text-halo-color': palette.sea, 'text-halo-width': 1.8 }
    }
  ]
}

function regionLayers(palette: Palette): LayerSpecification[] {
  const colour: ExpressionSpecification = ['match', ['get', 'tone'], 'loss', palette.loss, 'gain', palette.gain, 'model', palette.model, palette.ink]
  const selected: ExpressionSpecification = ['get', 'selected']
  const hovered: ExpressionSpecification = ['boolean', ['feature-state', 'hovered'], false]
  return [
    {
      id: 'region-fill', type: 'fill', source: 'region-fills',
      paint: { 'fill-color': colour, 'fill-opacity': ['get', 'tint'], 'fill-antialias': false }
    },
    {
      id: 'region-hatch', type: 'fill', source: 'region-fills', filter: ['!=', ['get', 'pattern'], ''],
      paint: { 'fill-pattern': ['image', ['get', 'pattern']], 'fill-antialias': false }
    },
    { id: 'overlap-fill', type: 'fill', source: 'overlap-fills', paint: { 'fill-pattern': overlapHatch, 'fill-antialias': false } },
    {
      id: 'region-line', type: 'line', source: 'region-lines', layout: { 'line-join': 'round' },
      paint: { 'line-color': colour, 'line-width': ['case', selected, 3, hovered, 2.75, 1.25] }
    },
    {
      id: 'region-chosen', type: 'line', source: 'region-lines', filter: ['get', 'selected'], layout: { 'line-join': 'round' },
      paint: { 'line-color': palette.ink, 'line-width': 1 }
    },
    {
      id: 'region-label', type: 'symbol', source: 'region-labels',
      layout: {
        'text-field': ['case', ['==', ['get', 'figure'], ''], ['get', 'name'],
          ['format', ['get', 'name'], {}, '\n', {}, ['get', 'figure'], { 'font-scale': 0.92 }]],
        'text-font': ['Noto Sans'],
        'text-size': 12.5,
        'text-line-height': 1.25,
        'text-max-width': 11,
        'text-padding': 4,
        'text-variable-anchor': ['center', 'top', 'bottom', 'left', 'right', 'top-left', 'bottom-right'],
        'text-radial-offset': 1.1,
        'text-justify': 'auto',
        'symbol-sort-key': ['get', 'rank']
      },
      paint: { 'text-color': palette.ink, 'text-opacity': insideEdge, 'text-halo-color': palette.paper, 'text-halo-width': 1.4 }
    }
  ]
}

function draftLayers(palette: Palette): LayerSpecification[] {
  const is = (kind: string): ExpressionSpecification => ['==', ['get', 'kind'], kind]
  return [
    { id: 'draft-fill', type: 'fill', source: 'draft-fill', paint: { 'fill-color': palette.model, 'fill-opacity': 0.18, 'fill-antialias': false } },
    {
      id: 'draft-line', type: 'line', source: 'draft-lines', filter: is('edge'), layout: { 'line-join': 'round', 'line-cap': 'round' },
      paint: { 'line-color': palette.model, 'line-width': 2 }
    },
    {
      id: 'draft-ahead', type: 'line', source: 'draft-lines', filter: is('ahead'),
      paint: { 'line-color': palette.model, 'line-width': 1.25, 'line-dasharray': [3, 3] }
    },
    {
      id: 'draft-fault', type: 'line', source: 'draft-lines', filter: is('fault'),
      paint: { 'line-color': palette.loss, 'line-width': 4, 'line-dasharray': [1.5, 1] }
    },
    {
      id: 'draft-middle', type: 'circle', source: 'draft-handles', filter: is('middle'),
      paint: { 'circle-radius': 3, 'circle-color': palette.paper, 'circle-stroke-color': palette.model, 'circle-stroke-width': 1, 'circle-opacity': 0.8, 'circle-stroke-opacity': 0.8 }
    },
    {
      id: 'draft-vertex', type: 'circle', source: 'draft-handles', filter: is('vertex'),
      paint: {
        'circle-radius': ['case', ['get', 'chosen'], 6.5, 4.5],
        'circle-color': ['case', ['get', 'chosen'], palette.model, palette.paper],
        'circle-stroke-color': palette.model,
        'circle-stroke-width': 2
      }
    }
  ]
}
