import { Map as Chart, setWorkerUrl, type MapOptions, type StyleSpecification } from 'maplibre-gl'
import 'maplibre-gl/dist/maplibre-gl.css'
import workerUrl from 'maplibre-gl/dist/maplibre-gl-worker.mjs?url'
import type { Palette } from '#shared/design/tokens'
import type { Outline } from '#shared/types/domain'
import type { MapProjection } from './mapStyle'
import type { MapPicture, Painter } from './picture/picture'

interface MapSetting {
  palette: Palette
  projection: MapProjection
  /** Land that ships, for a picture that is not made of tiles. */
  land: () => Promise<Outline | null>
  /** Whoever is asked for; else a canvas where WebGL has no graphics processor. */
  painter?: Painter
}

/** A map in an element, looking straight down, north up; labels wait for the page's Noto Sans. Only the painter that is used is fetched. */
export async function createMap(container: HTMLElement, { palette, projection, land, painter = drawnByProcessor() ? 'canvas' : 'webgl' }: MapSetting): Promise<{ map: Chart, picture: MapPicture }> {
  const fonts = Promise.race([document.fonts.load('400 24px "Noto Sans"', 'Aµ−'), new Promise(resolve => setTimeout(resolve, 1500))])
  if (painter === 'canvas') {
    const [{ canvasPicture, emptyStyle }] = await Promise.all([import('./picture/canvasPicture'), fonts])
    // Nothing is drawn on the library's own canvas, so it need have no pixels.
    const map = await chartIn(container, emptyStyle(projection), { pixelRatio: 0.02 })
    return { map, picture: canvasPicture(map, palette, land) }
  }
  const [{ webglPicture, webglStyle, giveImages }] = await Promise.all([import('./picture/webglPicture'), fonts])
  const map = await chartIn(container, webglStyle(palette, projection), { canvasContextAttributes: { antialias: !drawnByProcessor() } }, chart => giveImages(chart, palette))
  return { map, picture: webglPicture(map) }
}

/** `begun` has the map before its style is read. */
async function chartIn(container: HTMLElement, style: StyleSpecification, more: Partial<MapOptions>, begun?: (map: Chart) => void): Promise<Chart> {
  setWorkerUrl(workerUrl)
  const map = new Chart({
    container,
    style,
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
    ...more
  })
  map.touchZoomRotate.disableRotation()
  map.keyboard.disableRotation()
  begun?.(map)
  await map.once('load')
  return map
}

/** Whether WebGL has no graphics processor here: the globe then takes half a second for each frame. */
function drawnByProcessor(): boolean {
  const gl = document.createElement('canvas').getContext('webgl2')
  const named = gl?.getExtension('WEBGL_debug_renderer_info')
  const renderer = gl && named ? String(gl.getParameter(named.UNMASKED_RENDERER_WEBGL)) : ''
  gl?.getExtension('WEBGL_lose_context')?.loseContext()
  return /swiftshader|llvmpipe|softpipe|software|basic render/i.test(renderer)
}
