import { Map as Chart, setWorkerUrl } from 'maplibre-gl'
import 'maplibre-gl/dist/maplibre-gl.css'
import workerUrl from 'maplibre-gl/dist/maplibre-gl-worker.mjs?url'
import type { Palette } from '#shared/design/tokens'
import type { Outline } from '#shared/types/domain'
import { mapImages } from './colouring/images'
import { emptyStyle, mapStyle, type MapProjection } from './mapStyle'
import { canvasPicture } from './picture/canvasPicture'
import type { MapPicture, Painter } from './picture/picture'
import { webglPicture } from './picture/webglPicture'

interface MapSetting {
  palette: Palette
  projection: MapProjection
  /** Land that ships, for a picture that is not made of tiles. */
  land: () => Promise<Outline | null>
  /** Whoever is asked for; else a canvas where WebGL has no graphics processor. */
  painter?: Painter
}

/** A map in an element, looking straight down, north up; labels wait for the page's Noto Sans. */
export async function createMap(container: HTMLElement, { palette, projection, land, painter }: MapSetting): Promise<{ map: Chart, picture: MapPicture }> {
  await Promise.race([document.fonts.load('400 24px "Noto Sans"', 'Aµ−'), new Promise(resolve => setTimeout(resolve, 1500))])
  const onCanvas = (painter ?? (drawnByProcessor() ? 'canvas' : 'webgl')) === 'canvas'
  setWorkerUrl(workerUrl)
  const map = new Chart({
    container,
    style: onCanvas ? emptyStyle(projection) : mapStyle(palette, projection, location.origin),
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
    // Nothing is drawn on it, so it need have no pixels.
    ...onCanvas && { pixelRatio: 0.02 },
    canvasContextAttributes: { antialias: !drawnByProcessor() }
  })
  map.touchZoomRotate.disableRotation()
  map.keyboard.disableRotation()
  map.on('style.load', () => {
    if (onCanvas) return
    for (const [name, image] of mapImages(palette)) if (!map.hasImage(name)) map.addImage(name, image, { pixelRatio: 2 })
  })
  await map.once('load')
  return { map, picture: onCanvas ? canvasPicture(map, palette, land) : webglPicture(map) }
}

/** Whether WebGL has no graphics processor here: the globe then takes half a second for each frame. */
function drawnByProcessor(): boolean {
  const gl = document.createElement('canvas').getContext('webgl2')
  const named = gl?.getExtension('WEBGL_debug_renderer_info')
  const renderer = gl && named ? String(gl.getParameter(named.UNMASKED_RENDERER_WEBGL)) : ''
  gl?.getExtension('WEBGL_lose_context')?.loseContext()
  return /swiftshader|llvmpipe|softpipe|software|basic render/i.test(renderer)
}
