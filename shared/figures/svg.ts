import { print } from '../design/tokens.ts'
import { textWidth } from './textWidth.ts'
import type { Palette } from '../design/tokens.ts'
import type { Weight } from './textWidth.ts'

/** A drawing as text, with what a page needs to lay it out. */
export interface Figure {
  /** The whole `<svg>` element. */
  svg: string
  /** px */
  width: number
  height: number
  /** Where text stands, for tests: no two of these boxes meet, none leaves the figure. */
  labels: LabelBox[]
}

export interface Box { x: number, y: number, width: number, height: number }
export interface LabelBox extends Box { text: string }

export type Attributes = Readonly<Record<string, string | number | undefined | null>>

/** Text as XML, in content and in attributes; control characters, which XML refuses, are dropped. */
export function escapeXml(text: string): string {
  return text
    // eslint-disable-next-line no-control-regex
    .replace(/[\u0000-\u0008\u000B\u000C\u000E-\u001F\uFFFE\uFFFF]|[\uD800-\uDBFF](?![\uDC00-\uDFFF])|(?<![\uD800-\uDBFF])[\uDC00-\uDFFF]/g, '')
    .replace(/&/g, '&amp;')
    .replace(/</g, '&lt;')
    .replace(/>/g, '&gt;')
    .replace(/"/g, '&quot;')
    .replace(/'/g, '&#39;')
}

/** A coordinate to a hundredth of a pixel. */
export function coordinate(value: number): number {
  if (!Number.isFinite(value)) throw new RangeError(`a coordinate must be finite, got ${value}`)
  return Math.round(value * 100) / 100 + 0
}

/** One element; `undefined` and `null` attributes are left out, numbers rounded. */
export function element(name: string, attributes: Attributes, content = ''): string {
  const written = Object.entries(attributes)
    .filter(([, value]) => value !== undefined && value !== null)
    .map(([key, value]) => ` ${key}="${typeof value === 'number' ? coordinate(value) : escapeXml(value!)}"`)
    .join('')
  return content ? `<${name}${written}>${content}</${name}>` : `<${name}${written}/>`
}

export type Point = readonly [number, number]

function tenth(value: number): number {
  return coordinate(Math.round(value * 10) / 10)
}

/** Straight line through points as path data, to a tenth of a pixel. */
export function pathThrough(points: readonly Point[], closed = false): string {
  if (points.length === 0) return ''
  return `M${points.map(([x, y]) => `${tenth(x)},${tenth(y)}`).join('L')}${closed ? 'Z' : ''}`
}

export interface TextStyle {
  size?: number
  weight?: Weight
  fill?: string
  anchor?: 'start' | 'middle' | 'end'
}

/** Size of figure text in px. */
export const labelSize = 12
/** Part of the font size above and below the base line that a line of text takes up. */
export const ascent = 0.82
export const descent = 0.24

/** The box of a line of text whose base line starts, ends or has its middle at (x, y). */
export function textBox(text: string, x: number, y: number, style: TextStyle = {}): LabelBox {
  const size = style.size ?? labelSize
  const width = textWidth(text, size, style.weight)
  const left = style.anchor === 'middle' ? x - width / 2 : style.anchor === 'end' ? x - width : x
  return { text, x: left, y: y - size * ascent, width, height: size * (ascent + descent) }
}

/** Collects the elements of one figure and the boxes of its text. */
export class Canvas {
  readonly labels: LabelBox[] = []
  private readonly parts: string[] = []

  constructor(readonly palette: Palette) {}

  add(name: string, attributes: Attributes, content = ''): void {
    this.parts.push(element(name, attributes, content))
  }

  line(x1: number, y1: number, x2: number, y2: number, stroke: string, attributes: Attributes = {}): void {
    this.add('line', { x1, y1, x2, y2, stroke, ...attributes })
  }

  path(d: string, attributes: Attributes): void {
    if (d) this.add('path', { fill: 'none', ...attributes, d })
  }

  rect(box: Box, attributes: Attributes): void {
    this.add('rect', { ...box, ...attributes })
  }

  /** Writers of PDF know no rim behind text, and would say it twice to whoever searches the page. */
  private get isPrint(): boolean {
    return this.palette === print
  }

  /** A line of text. With `halo` it stands on a rim of that colour, so that lines under it do not cut it. */
  text(content: string, x: number, y: number, style: TextStyle & { halo?: string } = {}): LabelBox {
    const attributes: Attributes = {
      x,
      y,
      'font-size': style.size ?? labelSize,
      'font-weight': style.weight === 600 ? '600' : undefined,
      'text-anchor': style.anchor && style.anchor !== 'start' ? style.anchor : undefined,
    }
    const escaped = escapeXml(content)
    const box = textBox(content, x, y, style)
    if (style.halo && this.isPrint) this.rect(box, { 'fill': style.halo, 'fill-opacity': 0.7 })
    else if (style.halo) {
      const rim: Attributes = { 'stroke': style.halo, 'stroke-width': 3, 'stroke-linejoin': 'round', 'fill': style.halo, 'aria-hidden': 'true' }
      this.add('text', { ...attributes, ...rim }, escaped)
    }
    this.add('text', { ...attributes, fill: style.fill ?? this.palette.ink }, escaped)
    this.labels.push(box)
    return box
  }

  /** Everything drawn so far as one group, clipped to a path of the definitions. */
  content(): string {
    return this.parts.join('')
  }

  /** The figure. `title` names it, `description` says in words what it shows. */
  figure(width: number, height: number, title: string, description: string, definitions = ''): Figure {
    const head = element('title', {}, escapeXml(title)) + element('desc', {}, escapeXml(description))
    const svg = element('svg', {
      'xmlns': 'http://www.w3.org/2000/svg',
      'width': width,
      'height': height,
      'viewBox': `0 0 ${coordinate(width)} ${coordinate(height)}`,
      'role': 'img',
      'font-family': 'Noto Sans, Noto Sans Math, sans-serif',
    }, head + (definitions ? element('defs', {}, definitions) : '') + this.content())
    return { svg, width, height, labels: this.labels }
  }
}
