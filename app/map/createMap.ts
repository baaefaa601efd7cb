import { Map as Chart, setWorkerUrl } from 'maplibre-gl'
import 'maplibre-gl/dist/maplibre-gl.css'
import workerUrl from 'maplibre-gl/dist/maplibre-gl-worker.mjs?url'
import type { Palette } from '#shared/design/tokens'
import { mapImages } from './colouring/images'
import { mapLayers, mapStyle, type MapProjection } from './mapStyle'

/** A map in an element, looking straight down, north up; labels wait for the page's Noto Sans. */
export async function createMap(container: HTMLElement, palette: Palette, projection: MapProjection): Promise<Chart> {
  await Promise.race([document.fonts.load('400 24px "Noto Sans"', 'Aµ−'), new Promise(resolve => setTimeout(resolve, 1500))])
  setWorkerUrl(workerUrl)
  const map = new Chart({
    container,
    style: mapStyle(palette, projection, location.origin),
    center: [-30, 30],
    zoom: 1,
    minZoom: -2,
    maxZoom: 9,
    maxPitch: 0,
    dragRotate: false,
    pitchWithRotate: false,
    touchPitch: false,
    attributionControl: false,
    fadeDuration: 0,
    locale: { 'Map.Title': 'Map of the regions' },
    canvasContextAttributes: { antialias: !drawnByProcessor() }
  })
  map.touchZoomRotate.disableRotation()
  map.keyboard.disableRotation()
  map.on('style.load', () => {
    for (const [name, image] of mapImages(palette)) if (!map.hasImage(name)) map.addImage(name, image, { pixelRatio: 2 })
  })
  await map.once('load')
  return map
}

/** Colours of another theme on a map that stands. */
export function repaint(map: Chart, palette: Palette): void {
  for (const [name, image] of mapImages(palette)) map.updateImage(name, image)
  for (const layer of mapLayers(palette)) {
    for (const [name, value] of Object.entries(layer.paint ?? {})) {
      map.setPaintProperty(layer.id, name as never, value as never)
    }
  }
}

/** Whether WebGL has no graphics processor here: smooth edges then cost a multiple of each frame. */
function drawnByProcessor(): boolean {
  const gl = document.createElement('canvas').getContext('webgl2')
  const named = gl?.getExtension('WEBGL_debug_renderer_info')
  const renderer = gl && named ? String(gl.getParameter(named.UNMASKED_RENDERER_WEBGL)) : ''
  gl?.getExtension('WEBGL_lose_context')?.loseContext()
  return /swiftshader|llvmpipe|softpipe|software|basic render/i.test(renderer)
}
