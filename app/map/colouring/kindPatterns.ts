import type { RegionKind } from '#shared/types/domain'
import { lossHatch, modelHatch } from './colouring'

/** Side of the tile that the paths below fill, in px of the page. */
export const patternSide = 8

/** Pen strokes that tell the kinds apart without colour, as SVG paths on a tile that repeats; a basin is plain. */
export const kindPaths: Readonly<Record<RegionKind, string>> = {
  'aquifer': 'M-1 -1L9 9M-1 7L1 9M7 -1L9 1',
  'basin': '',
  'lake': 'M0 2H8M0 6H8',
  'reservoir': 'M0 2H4M4 6H8',
  'soil-water': 'M2 2h.01M6 6h.01',
  'snow-water': 'M2 .5V3.5M.5 2H3.5M6 4.5V7.5M4.5 6H7.5',
  'ice-sector': 'M2 0V8M6 0V8',
  'glacier-region': 'M4 0V8M0 4H8',
}

const hatch = 'M-1 1L1 -1M-1 9L9 -1M7 9L9 7'

/** The strokes of a region's pattern on a tile; empty for none. */
export function patternPath(pattern: string): string {
  if (pattern === lossHatch || pattern === modelHatch) return hatch
  return kindPaths[pattern.replace(/^kind-/, '') as RegionKind] ?? ''
}

export const isDotted = (path: string) => path.includes('h.01')

/** A tile as an image for the map, at twice the pixels of the page. */
export function patternImage(path: string, colour: string): ImageData {
  const side = 2 * patternSide
  const canvas = document.createElement('canvas')
  canvas.width = canvas.height = side
  const context = canvas.getContext('2d')!
  context.scale(2, 2)
  context.strokeStyle = colour
  context.globalAlpha = 0.6
  context.lineWidth = isDotted(path) ? 1.6 : 0.9
  context.lineCap = isDotted(path) ? 'round' : 'butt'
  if (path) context.stroke(new Path2D(path))
  return context.getImageData(0, 0, side, side)
}
