import { textWidth } from '../textWidth.ts'
import { levelText, lineStyle } from './lineStyle.ts'
import type { Canvas } from '../svg.ts'
import type { LineKind } from './lineStyle.ts'
import type { SeaLevelMapData } from './seaLevelFigure.ts'

interface Entry { text: string, fill: string | null, line: LineKind | null }

/** What lines and tints mean, below the map; answers with the lowest point. */
export function drawKey(canvas: Canvas, { contours, unit, regions }: SeaLevelMapData, top: number, width: number): number {
  const { palette } = canvas
  const { mean, levels, low, high } = contours
  const entries: (Entry | null)[] = [
    low.rings.length ? { text: mean !== null && mean < 0 ? 'falls more than the mean' : 'the sea falls', fill: palette.loss, line: 'fall' } : null,
    levels.includes(0) ? { text: 'no change', fill: null, line: 'zero' } : null,
    mean === null ? null : { text: `${levelText(mean, mean)} ${unit}`, fill: null, line: 'mean' },
    high.rings.length ? { text: mean !== null && mean > 0 ? 'rises more than the mean' : 'the sea rises', fill: palette.gain, line: 'rise' } : null,
    regions.some(region => (region.massGtPerYear ?? 0) < 0) ? { text: 'mass lost', fill: 'loss', line: null } : null,
    regions.some(region => (region.massGtPerYear ?? 0) > 0) ? { text: 'mass gained', fill: 'gain', line: null } : null,
  ]
  let [x, base] = [2, top + 20]
  for (const entry of entries) {
    if (!entry) continue
    const needed = 28 + textWidth(entry.text, 12)
    if (x > 2 && x + needed > width) [x, base] = [2, base + 20]
    drawSwatch(canvas, entry, x, base)
    canvas.text(entry.text, x + 28, base, { fill: palette.soft })
    x += needed + 18
  }
  const source = 'Equal-area. Coast: Natural Earth'
  if (x + textWidth(source, 11) < width) canvas.text(source, width, base, { size: 11, anchor: 'end', fill: palette.soft })
  return base + 6
}

function drawSwatch(canvas: Canvas, { fill, line }: Entry, x: number, base: number): void {
  const { palette } = canvas
  const box = { x, y: base - 10, width: 22, height: 11 }
  if (line === null) {
    const colour = fill === 'gain' ? palette.gain : palette.loss
    canvas.rect({ ...box, width: 16 }, { 'fill': colour, 'fill-opacity': 0.3, 'stroke': colour, 'stroke-width': 1.25 })
    return
  }
  if (fill) {
    canvas.rect(box, { fill: palette.sea })
    canvas.rect(box, { 'fill': fill, 'fill-opacity': 0.16 })
  }
  canvas.line(x, base - 4.5, x + 22, base - 4.5, palette.ink, lineStyle(palette, line))
}
