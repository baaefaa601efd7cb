import { formatNumber } from '../../format/digits.ts'
import { formatLongitude } from '../../format/places.ts'
import { figureWidth, paletteOf } from '../options.ts'
import { isFree } from '../layout.ts'
import { Canvas, coordinate, element, pathThrough, textBox } from '../svg.ts'
import { shortened, textWidth } from '../textWidth.ts'
import { ellipseOf, finiteDrift, polar } from './data.ts'
import { placeDriftLabels } from './labels.ts'
import { driftView } from './view.ts'
import type { FigureOptions } from '../options.ts'
import type { Obstacles } from '../layout.ts'
import type { Box, Figure, LabelBox, Point } from '../svg.ts'
import type { DriftData, DriftItem, DriftVector } from './data.ts'
import type { WantedLabel } from './labels.ts'
import type { DriftCovariance } from './vector.ts'
import type { DriftView } from './view.ts'

export interface DriftOptions extends FigureOptions {
  /** px; the drawing without the list below. Chosen from the width unless told. */
  height?: number
}

interface Leg extends DriftItem { from: Point, to: Point, figure: string }

/**
 * The pole's drift, region by region head to tail, on the pole plane seen from above the north pole: 0° to the right, 90° E
 * up. Rings are mas per year; the ellipse at the tip is one sigma; the observed drift is dashed.
 */
export function driftFigure(given: DriftData, options: DriftOptions): Figure {
  const data = finiteDrift(given)
  const width = figureWidth(options.width)
  const height = options.height ?? Math.round(Math.min(440, Math.max(260, width * 0.8)))
  const palette = paletteOf(options.theme)
  const canvas = new Canvas(palette)
  const legs = legsOf(data.items)
  const points = legs.flatMap(leg => [leg.from, leg.to])
  const view = driftView([...points, ...reach(data.total), ...(data.observed ? reach(data.observed) : [])], width, height)
  const clip = `${options.id}-frame`
  const clipPath = `url(#${clip})`
  drawPlane(canvas, view, clipPath)

  const origin = view.at([0, 0])
  const tipOf = ({ chi1, chi2 }: DriftVector) => view.at([chi1, chi2])
  const ellipses = [drawEllipse(canvas, view, data.total, palette.model, clipPath)]
  if (data.observed) {
    ellipses.push(drawEllipse(canvas, view, data.observed, palette.observed, clipPath))
    drawArrow(canvas, origin, tipOf(data.observed), { stroke: palette.observed, width: 1.5, dashes: '5 3' })
  }
  for (const leg of legs) {
    drawArrow(canvas, view.at(leg.from), view.at(leg.to), { stroke: legColour(leg, palette), width: 1.75, open: leg.mass > 0 })
  }
  drawArrow(canvas, origin, tipOf(data.total), { stroke: palette.model, width: 2.5 })
  canvas.add('circle', { cx: origin[0], cy: origin[1], r: 2.5, fill: palette.ink })

  const named: NamedVector[] = [
    { text: `model ${figureOf(data.total)}`, weight: 600, fill: palette.model, from: origin, to: tipOf(data.total), atTip: true },
    ...(data.observed ? [{ text: `observed ${figureOf(data.observed)}`, fill: palette.observed, from: origin, to: tipOf(data.observed), atTip: true }] : []),
    ...legs.map(leg => ({ text: shortened(leg.name, width * 0.5, 12), fill: palette.ink, from: view.at(leg.from), to: view.at(leg.to), atTip: false, leg })),
  ]
  const frame = { x: 2, y: 2, width: width - 4, height: height - 4 }
  const segments = named.map(({ from, to }): [Point, Point] => [from, to])
  const boxes = drawSides(canvas, view)
  const placed = placeDriftLabels(named, { frame, boxes, segments })
  placed.forEach((place, i) => {
    if (place?.leader) canvas.line(...place.leader[0], ...place.leader[1], palette.soft, { 'stroke-width': 0.75 })
    if (place) canvas.text(named[i]!.text, place.x, place.y, { fill: named[i]!.fill, weight: named[i]!.weight, halo: palette.paper })
  })
  const leaders = placed.flatMap(place => place?.leader ? [place.leader] : [])
  drawRingLabels(canvas, view, { frame, boxes: [...boxes, ...ellipses, ...placed.flatMap(place => place ? [place.box] : [])], segments: [...segments, ...leaders] })

  const bottom = drawList(canvas, named.filter((_, i) => !placed[i]), drawKey(canvas, legs, data.observed !== null, height, width), width)
  const definitions = element('clipPath', { id: clip }, element('rect', { x: 0, y: 0, width, height }))
  return canvas.figure(width, Math.ceil(bottom), 'Drift of the pole, region by region', describe(data, legs), definitions)
}

interface NamedVector extends WantedLabel { fill: string, leg?: Leg }

function legsOf(items: readonly DriftItem[]): Leg[] {
  let from: Point = [0, 0]
  return [...items]
    .sort((a, b) => Math.hypot(b.chi1, b.chi2) - Math.hypot(a.chi1, a.chi2))
    .map((item) => {
      const to: Point = [from[0] + item.chi1, from[1] + item.chi2]
      const leg = { ...item, from, to, figure: figureOf(item) }
      from = to
      return leg
    })
}

/** Tip and outermost points of the ellipse, so that the view holds it. */
function reach(vector: DriftVector & { covariance: DriftCovariance | null }): Point[] {
  const { chi1, chi2, covariance } = vector
  if (!covariance) return [[chi1, chi2]]
  const [dx, dy] = [Math.sqrt(Math.max(0, covariance.c11)), Math.sqrt(Math.max(0, covariance.c22))]
  return [[chi1 - dx, chi2 - dy], [chi1 + dx, chi2 + dy]]
}

/** `2.32 mas/yr to 35° W` */
function figureOf(vector: { chi1: number, chi2: number }): string {
  const { length, direction } = polar(vector)
  const digits = length >= 10 ? 1 : length >= 0.095 ? 2 : length >= 0.00095 ? 4 : 6
  return direction === null ? '0\u00a0mas/yr' : `${formatNumber(length, digits)}\u00a0mas/yr to ${formatLongitude(direction)}`
}

function drawPlane(canvas: Canvas, view: DriftView, clipPath: string): void {
  const { palette } = canvas
  const [cx, cy] = view.at([0, 0])
  const rings = view.rings.map(radius => element('circle', { cx, cy, r: radius * view.scale, fill: 'none', stroke: palette.hairline })).join('')
  const axes = element('path', { d: `M0,${coordinate(cy)}H${coordinate(view.width)}M${coordinate(cx)},0V${coordinate(view.height)}`, fill: 'none', stroke: palette.hairline })
  canvas.add('g', { 'clip-path': clipPath }, rings + axes)
}

/** Names the four directions at the ends of the axes. */
function drawSides(canvas: Canvas, view: DriftView): LabelBox[] {
  const { palette } = canvas
  const [cx, cy] = view.at([0, 0])
  const style = { size: 11, fill: palette.soft, halo: palette.paper }
  const rightwards = cx + 60 < view.width
  return [
    canvas.text('0° χ₁', view.width - 4, cy - 5, { ...style, anchor: 'end' }),
    canvas.text('180°', 4, cy - 5, style),
    canvas.text('90°\u00a0E χ₂', rightwards ? cx + 5 : cx - 5, 13, { ...style, anchor: rightwards ? 'start' : 'end' }),
    canvas.text('90°\u00a0W', rightwards ? cx + 5 : cx - 5, view.height - 6, { ...style, anchor: rightwards ? 'start' : 'end' }),
  ]
}

/** Writes each ring's radius where there is room on it; the unit stands with the outermost one that is labelled. */
function drawRingLabels(canvas: Canvas, view: DriftView, obstacles: Obstacles): void {
  const { palette } = canvas
  const origin = view.at([0, 0])
  let unit = ' mas/yr'
  for (const radius of view.rings.toReversed()) {
    for (const degrees of [225, 135, 315, 45, 200, 250, 160, 110, 290, 340, 20, 70]) {
      const angle = degrees * Math.PI / 180
      const text = `${view.ringText(radius)}${unit}`
      const x = origin[0] + radius * view.scale * Math.cos(angle)
      const y = origin[1] - radius * view.scale * Math.sin(angle) + 4
      const box = textBox(text, x, y, { size: 11, anchor: 'middle' })
      if (!isFree(box, obstacles, 3)) continue
      canvas.text(text, x, y, { size: 11, anchor: 'middle', fill: palette.soft, halo: palette.paper })
      obstacles.boxes.push(box)
      unit = ''
      break
    }
  }
}

/** One-sigma ellipse at a tip; gives the ground it covers. */
function drawEllipse(canvas: Canvas, view: DriftView, centre: DriftData['total'], colour: string, clipPath: string): Box {
  const { covariance } = centre
  const [x, y] = view.at([centre.chi1, centre.chi2])
  if (!covariance || ![covariance.c11, covariance.c12, covariance.c22].every(Number.isFinite)) return { x, y, width: 0, height: 0 }
  const { a, b, angle } = ellipseOf(covariance)
  if (!(a > 0)) return { x, y, width: 0, height: 0 }
  const points: Point[] = Array.from({ length: 64 }, (_, i) => {
    const t = i / 64 * 2 * Math.PI
    const [u, v] = [a * Math.cos(t), b * Math.sin(t)]
    return view.at([centre.chi1 + u * Math.cos(angle) - v * Math.sin(angle), centre.chi2 + u * Math.sin(angle) + v * Math.cos(angle)])
  })
  canvas.path(pathThrough(points, true), { 'fill': colour, 'fill-opacity': 0.14, 'stroke': colour, 'stroke-width': 0.75, 'stroke-opacity': 0.6, 'clip-path': clipPath })
  const [halfWidth, halfHeight] = [Math.sqrt(Math.max(0, covariance.c11)) * view.scale, Math.sqrt(Math.max(0, covariance.c22)) * view.scale]
  return { x: x - halfWidth, y: y - halfHeight, width: 2 * halfWidth, height: 2 * halfHeight }
}

interface ArrowStyle { stroke: string, width: number, dashes?: string, open?: boolean }

/** Warm for mass lost, cool for mass gained, soft for what has no mass: background. */
function legColour({ mass }: Leg, palette: Canvas['palette']): string {
  return mass > 0 ? palette.gain : mass < 0 ? palette.loss : palette.soft
}

/** A vector; the head is open for mass gained. */
function drawArrow(canvas: Canvas, from: Point, to: Point, { stroke, width, dashes, open }: ArrowStyle): void {
  const [dx, dy] = [to[0] - from[0], to[1] - from[1]]
  const length = Math.hypot(dx, dy)
  if (length < 0.5) return
  const [ux, uy] = [dx / length, dy / length]
  const head = Math.min(width > 2 ? 10 : 8, length * 0.45)
  const neck: Point = [to[0] - ux * head, to[1] - uy * head]
  canvas.line(...from, ...neck, stroke, { 'stroke-width': width, 'stroke-dasharray': dashes })
  const half = head * 0.42
  const outline = pathThrough([to, [neck[0] - uy * half, neck[1] + ux * half], [neck[0] + uy * half, neck[1] - ux * half]], true)
  canvas.path(outline, { 'fill': open ? canvas.palette.paper : stroke, stroke, 'stroke-width': 1, 'stroke-linejoin': 'round' })
}

/** What the arrows mean, on one line below the plane. */
function drawKey(canvas: Canvas, legs: readonly Leg[], observed: boolean, top: number, width: number): number {
  const { palette } = canvas
  const entries: { text: string, style: ArrowStyle }[] = [
    ...(legs.some(leg => leg.mass < 0) ? [{ text: 'mass lost', style: { stroke: palette.loss, width: 1.75 } }] : []),
    ...(legs.some(leg => leg.mass > 0) ? [{ text: 'mass gained', style: { stroke: palette.gain, width: 1.75, open: true } }] : []),
    ...(legs.some(leg => leg.mass === 0) ? [{ text: 'background', style: { stroke: palette.soft, width: 1.75 } }] : []),
    { text: 'model', style: { stroke: palette.model, width: 2.5 } },
    ...(observed ? [{ text: 'observed', style: { stroke: palette.observed, width: 1.5, dashes: '5 3' } }] : []),
  ]
  let [x, base] = [2, top + 16]
  for (const { text, style } of entries) {
    const needed = 30 + textWidth(text, 12)
    if (x + needed > width) [x, base] = [2, base + 18]
    drawArrow(canvas, [x, base - 4], [x + 24, base - 4], style)
    canvas.text(text, x + 30, base, { fill: palette.soft })
    x += needed + 16
  }
  return base + 8
}

/** Vectors that found no room for a label in the drawing, with their figures. */
function drawList(canvas: Canvas, unnamed: readonly NamedVector[], top: number, width: number): number {
  const { palette } = canvas
  unnamed.forEach(({ text, leg, fill }, i) => {
    const base = top + 16 + i * 20
    const colour = leg ? legColour(leg, palette) : fill
    drawArrow(canvas, [2, base - 4], [20, base - 4], { stroke: colour, width: 1.75, open: leg !== undefined && leg.mass > 0 })
    const figure = leg?.figure ?? ''
    canvas.text(shortened(leg?.name ?? text, width - 40 - textWidth(figure, 12), 12), 26, base)
    if (figure) canvas.text(figure, width, base, { anchor: 'end', fill: palette.soft })
    canvas.line(0, base + 6, width, base + 6, palette.hairline)
  })
  return top + unnamed.length * 20 + 4
}

function describe(data: DriftData, legs: readonly Leg[]): string {
  const seen = data.observed ? ` Observed: ${figureOf(data.observed)}.` : ''
  return `Seen from above the north pole, 0° to the right and 90° E up. ${legs.map(leg => `${leg.name} ${leg.figure}`).join('; ') || 'No region has a trend'}. Model: ${figureOf(data.total)}.${seen}`
}
