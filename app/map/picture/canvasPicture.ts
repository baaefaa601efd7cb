import type { FeatureCollection } from 'geojson'
import type { Map as Chart, StyleSpecification } from 'maplibre-gl'
import type { Palette } from '#shared/design/tokens'
import { isInsideRing } from '#shared/geo/pointInRing'
import type { Outline } from '#shared/types/domain'
import { mapImages, overlapHatch } from '../colouring/images'
import type { MapProjection } from '../mapStyle'
import { toPlace } from '../view'
import { cameraOf } from './camera'
import { groundOf, type Ground } from './ground'
import { MapLabels } from './mapLabels'
import { paintBorders, paintDraft, paintFills, paintGround, paintHatched, paintLimb, paintOverlay } from './paint'
import { sourceIds, type MapPicture, type SourceId } from './picture'
import { shapesOf, type Shape } from './shapes'
import { sharpness } from './sharpness'
import { planeRing } from './trace'

/** A map whose camera moves over nothing: what is seen is drawn elsewhere. */
export function emptyStyle(projection: MapProjection): StyleSpecification {
  return { version: 8, projection: { type: projection === 'globe' ? 'globe' : 'mercator' }, sources: {}, layers: [] }
}

/**
 * The map drawn on a plain canvas, for computers without a graphics processor: there WebGL takes half a second for a globe, this a
 * few milliseconds. The chart keeps camera and gestures and draws nothing itself.
 */
export function canvasPicture(map: Chart, first: Palette, land: () => Promise<Outline | null>): MapPicture {
  const canvas = document.createElement('canvas')
  canvas.className = 'pointer-events-none absolute left-0 top-0 h-full w-full'
  canvas.setAttribute('aria-hidden', 'true')
  map.getCanvasContainer().append(canvas)
  // It keeps the focus; being seen would cost as much as a second map.
  map.getCanvas().style.opacity = '0'
  // Read often: otherwise the browser may hand the canvas to a graphics processor that is not there.
  const pen = canvas.getContext('2d', { alpha: false, willReadFrequently: true })!
  const shapes = Object.fromEntries(sourceIds.map(id => [id, []])) as unknown as Record<SourceId, Shape[]>
  const labels = new MapLabels()
  let palette = first
  let patterns = patternsOf(pen, palette)
  let ground: Ground = groundOf(null)
  let hovered: string | null = null
  const sharp = sharpness()
  let restless = false
  void land().then((outline) => {
    ground = groundOf(outline)
    map.triggerRepaint()
  })

  function draw(): void {
    const screen = Math.min(2, devicePixelRatio)
    const isMoving = map.isMoving()
    const ratio = sharp.ratio(isMoving, performance.now(), screen)
    const camera = cameraOf(map, ratio)
    restless = isMoving
    fit(canvas, camera.width * ratio, camera.height * ratio)
    pen.setTransform(ratio, 0, 0, ratio, 0, 0)
    pen.fillStyle = palette.paper
    pen.fillRect(0, 0, camera.width, camera.height)
    paintGround(pen, ground, camera, palette)
    labels.arrange(shapes['region-labels'], shapes['overlay-lines'], camera, map.getZoom(), palette)
    paintOverlay(pen, shapes['overlay-lines'], camera, palette)
    labels.paint(pen, 'ground', ratio, screen)
    paintFills(pen, shapes['region-fills'], camera, palette, patterns)
    paintHatched(pen, shapes['overlap-fills'], camera, patterns(overlapHatch))
    paintBorders(pen, shapes['region-lines'], camera, palette, { hovered, hairline: isMoving ? 1 / ratio : null })
    labels.paint(pen, 'regions', ratio, screen)
    paintLimb(pen, camera, palette)
    paintDraft(pen, { fill: shapes['draft-fill'], lines: shapes['draft-lines'], handles: shapes['draft-handles'] }, camera, palette)
  }

  map.on('render', draw)
  map.on('idle', () => { if (restless) draw() })
  draw()
  return {
    painter: 'canvas',
    set: (source: SourceId, data: FeatureCollection) => {
      shapes[source] = shapesOf(data)
      map.triggerRepaint()
    },
    hover: (id) => {
      hovered = id
      map.triggerRepaint()
    },
    repaint: (colours) => {
      palette = colours
      patterns = patternsOf(pen, palette)
      labels.forget()
      map.triggerRepaint()
    },
    regionAt: ({ x, y }) => {
      const place = toPlace(map, { x, y })
      return labels.regionAt(x, y) ?? (place && regionHolding(shapes['region-fills'], place))
    },
  }
}

function fit(canvas: HTMLCanvasElement, width: number, height: number): void {
  const [w, h] = [Math.max(1, Math.round(width)), Math.max(1, Math.round(height))]
  if (canvas.width !== w) canvas.width = w
  if (canvas.height !== h) canvas.height = h
}

function patternsOf(pen: CanvasRenderingContext2D, palette: Palette): (name: string) => CanvasPattern | null {
  const made = new Map(mapImages(palette).map(([name, { width, height, data }]) => {
    const tile = document.createElement('canvas')
    tile.width = width
    tile.height = height
    tile.getContext('2d')!.putImageData(new ImageData(new Uint8ClampedArray(data), width, height), 0, 0)
    return [name, pen.createPattern(tile, 'repeat')]
  }))
  return name => made.get(name) ?? null
}

function regionHolding(fills: readonly Shape[], [lon, lat]: readonly [number, number]): string | null {
  const found = fills.findLast(({ polygons }) => polygons.some(rings => rings.filter(ring => isInsideRing(lon, lat, planeRing(ring))).length % 2 === 1))
  return found ? String(found.properties.id) : null
}
