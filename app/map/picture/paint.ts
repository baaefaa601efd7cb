import type { Palette } from '#shared/design/tokens'
import type { Camera } from './camera'
import type { Ground } from './ground'
import type { Path } from './path'
import type { Shape } from './shapes'
import { standsAt, traceFill, traceLine, type Rings } from './trace'

/** A pattern's image by its name; it is repeated from a region's own middle, so that it turns with the Earth. */
export type Patterns = (name: string) => CanvasPattern | null

type Pen = CanvasRenderingContext2D

function stroke(pen: Pen, paths: readonly Path[], camera: Camera): void {
  // One by one: a canvas is many times quicker with small paths than with a single large one.
  for (const path of paths) {
    pen.beginPath()
    if (traceLine(pen, path, camera)) pen.stroke()
  }
}

function fill(pen: Pen, polygons: readonly Rings[], camera: Camera): void {
  pen.beginPath()
  if (traceFill(pen, polygons, camera)) pen.fill('evenodd')
}

export function paintGround(pen: Pen, { land, coasts, graticule }: Ground, camera: Camera, palette: Palette): void {
  pen.fillStyle = palette.sea
  pen.beginPath()
  if (camera.kind === 'globe') pen.arc(camera.width / 2, camera.height / 2, camera.limb, 0, 2 * Math.PI)
  else pen.rect(0, 0, camera.width, camera.height)
  pen.fill()
  pen.fillStyle = palette.land
  for (const polygons of land) fill(pen, polygons, camera)
  pen.strokeStyle = palette.soft
  pen.lineWidth = 0.5
  pen.globalAlpha = 0.6
  stroke(pen, coasts, camera)
  pen.globalAlpha = 0.3
  stroke(pen, graticule, camera)
  pen.globalAlpha = 1
}

/** The globe's edge. */
export function paintLimb(pen: Pen, camera: Camera, palette: Palette): void {
  if (camera.kind !== 'globe') return
  pen.beginPath()
  pen.arc(camera.width / 2, camera.height / 2, camera.limb, 0, 2 * Math.PI)
  pen.strokeStyle = palette.ink
  pen.lineWidth = 1
  pen.stroke()
}

/** Lines of equal effect: solid above zero, dashed below, heavy at zero. */
export function paintOverlay(pen: Pen, shapes: readonly Shape[], camera: Camera, palette: Palette): void {
  pen.strokeStyle = palette.ink
  pen.lineJoin = 'round'
  for (const { properties, lines } of shapes) {
    pen.lineWidth = properties.sign === 0 ? 2 : 0.9
    pen.globalAlpha = properties.sign === 0 ? 0.85 : 0.7
    pen.setLineDash(properties.sign === -1 ? [4.5, 2.7] : [])
    stroke(pen, lines, camera)
  }
  pen.setLineDash([])
  pen.globalAlpha = 1
}

export function toneOf(palette: Palette, tone: unknown): string {
  return tone === 'loss' ? palette.loss : tone === 'gain' ? palette.gain : tone === 'model' ? palette.model : palette.ink
}

export function paintFills(pen: Pen, shapes: readonly Shape[], camera: Camera, palette: Palette, patterns: Patterns): void {
  for (const { properties, polygons } of shapes) {
    pen.beginPath()
    if (!traceFill(pen, polygons, camera)) continue
    pen.fillStyle = toneOf(palette, properties.tone)
    pen.globalAlpha = Number(properties.tint)
    pen.fill('evenodd')
    pen.globalAlpha = 1
    if (properties.pattern) fillWith(pen, patterns(String(properties.pattern)), polygons, camera)
  }
}

export function paintHatched(pen: Pen, shapes: readonly Shape[], camera: Camera, pattern: CanvasPattern | null): void {
  for (const { polygons } of shapes) {
    pen.beginPath()
    if (traceFill(pen, polygons, camera)) fillWith(pen, pattern, polygons, camera)
  }
}

/** Fills what is traced. */
function fillWith(pen: Pen, pattern: CanvasPattern | null, polygons: readonly Rings[], camera: Camera): void {
  if (!pattern) return
  const [at] = polygons[0]?.[0] ? standsAt(polygons[0][0], camera) : []
  pattern.setTransform(new DOMMatrix([0.5, 0, 0, 0.5, Math.round(at?.x ?? 0), Math.round(at?.y ?? 0)]))
  pen.fillStyle = pattern
  pen.fill('evenodd')
}

/** `hairline`: the width of one dot, for while the map moves; a canvas draws wider lines several times slower. */
export function paintBorders(pen: Pen, shapes: readonly Shape[], camera: Camera, palette: Palette, { hovered, hairline }: { hovered: string | null, hairline: number | null }): void {
  pen.lineJoin = hairline ? 'bevel' : 'round'
  for (const { properties, lines } of shapes) {
    pen.strokeStyle = toneOf(palette, properties.tone)
    pen.lineWidth = properties.selected ? 3 : properties.id === hovered ? 2.75 : hairline ?? 1.25
    stroke(pen, lines, camera)
    if (!properties.selected) continue
    pen.strokeStyle = palette.ink
    pen.lineWidth = 1
    stroke(pen, lines, camera)
  }
}

const draftLines: Readonly<Record<string, { width: number, dash: number[] }>> = {
  edge: { width: 2, dash: [] }, ahead: { width: 1.25, dash: [3.75, 3.75] }, fault: { width: 4, dash: [6, 4] },
}

export function paintDraft(pen: Pen, parts: { fill: readonly Shape[], lines: readonly Shape[], handles: readonly Shape[] }, camera: Camera, palette: Palette): void {
  pen.fillStyle = palette.model
  pen.globalAlpha = 0.18
  for (const { polygons } of parts.fill) fill(pen, polygons, camera)
  pen.globalAlpha = 1
  for (const [kind, { width, dash }] of Object.entries(draftLines)) {
    pen.strokeStyle = kind === 'fault' ? palette.loss : palette.model
    pen.lineWidth = width
    pen.setLineDash(dash)
    for (const { properties, lines } of parts.lines) if (properties.kind === kind) stroke(pen, lines, camera)
  }
  pen.setLineDash([])
  for (const { properties, points } of parts.handles) {
    for (const { x, y } of points.flatMap(point => standsAt(point, camera))) handle(pen, x, y, properties, palette)
  }
}

function handle(pen: Pen, x: number, y: number, { kind, chosen }: Record<string, unknown>, palette: Palette): void {
  const isVertex = kind === 'vertex'
  pen.beginPath()
  pen.arc(x, y, isVertex ? chosen ? 6.5 : 4.5 : 3, 0, 2 * Math.PI)
  pen.globalAlpha = isVertex ? 1 : 0.8
  pen.fillStyle = chosen ? palette.model : palette.paper
  pen.fill()
  pen.strokeStyle = palette.model
  pen.lineWidth = isVertex ? 2 : 1
  pen.stroke()
  pen.globalAlpha = 1
}
