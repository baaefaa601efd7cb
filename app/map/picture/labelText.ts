/** How a label looks; lengths in pixels of the page, `spacing` and `widestEm` in parts of the size. */
export interface LabelStyle {
  size: number
  colour: string
  halo: string
  haloWidth: number
  spacing: number
  lineHeight: number
  widestEm: number
  /** Room kept free about it. */
  padding: number
}

export interface LabelLine { text: string, /** Part of the style's size. */ scale: number }

/** A label broken into lines, with the room that it takes. */
export interface LaidLabel { style: LabelStyle, lines: LabelLine[], width: number, height: number }

const family = '"Noto Sans", sans-serif'

type Writer = Pick<CanvasRenderingContext2D, 'font' | 'letterSpacing' | 'measureText'>

function widthOf(writer: Writer, { text, scale }: LabelLine, style: LabelStyle): number {
  writer.font = `${style.size * scale}px ${family}`
  writer.letterSpacing = `${style.spacing * style.size * scale}px`
  return writer.measureText(text).width
}

/** Lines of about equal length, none wider than the style allows where its words are not. */
export function layLabel(writer: Writer, texts: readonly LabelLine[], style: LabelStyle): LaidLabel {
  const lines = texts.flatMap(line => broken(writer, line, style))
  const width = Math.max(...lines.map(line => widthOf(writer, line, style)))
  return { style, lines, width, height: lines.reduce((sum, { scale }) => sum + style.size * scale * style.lineHeight, 0) }
}

function broken(writer: Writer, line: LabelLine, style: LabelStyle): LabelLine[] {
  const whole = widthOf(writer, line, style)
  const widest = style.widestEm * style.size
  if (whole <= widest) return [line]
  const wanted = whole / Math.ceil(whole / widest)
  const out: string[] = []
  let text = ''
  for (const word of line.text.split(' ')) {
    const longer = text ? `${text} ${word}` : word
    const now = widthOf(writer, { text: longer, scale: line.scale }, style)
    const before = text ? widthOf(writer, { text, scale: line.scale }, style) : 0
    // A word goes where the line comes nearer to the wanted length.
    if (text && (now > widest || now - wanted > wanted - before)) {
      out.push(text)
      text = word
    }
    else text = longer
  }
  out.push(text)
  return out.map(piece => ({ text: piece, scale: line.scale }))
}

/** The label with its halo on a canvas of its own, `ratio` pixels for each of the page: drawn once, then only copied. */
export function labelImage(label: LaidLabel, ratio: number): HTMLCanvasElement {
  const { style, lines, width, height } = label
  const edge = Math.ceil(style.haloWidth) + 1
  const canvas = document.createElement('canvas')
  canvas.width = Math.ceil((width + 2 * edge) * ratio)
  canvas.height = Math.ceil((height + 2 * edge) * ratio)
  const pen = canvas.getContext('2d', { willReadFrequently: true })!
  pen.scale(ratio, ratio)
  pen.textAlign = 'center'
  pen.textBaseline = 'middle'
  pen.lineJoin = 'round'
  pen.strokeStyle = style.halo
  pen.fillStyle = style.colour
  pen.lineWidth = 2 * style.haloWidth
  for (const paint of ['strokeText', 'fillText'] as const) {
    let y = edge
    for (const { text, scale } of lines) {
      const step = style.size * scale * style.lineHeight
      pen.font = `${style.size * scale}px ${family}`
      pen.letterSpacing = `${style.spacing * style.size * scale}px`
      pen[paint](text, edge + width / 2, y + step / 2)
      y += step
    }
  }
  return canvas
}

/** From the image's corner to the middle of its text. */
export function imageCentre({ style, width, height }: LaidLabel): { x: number, y: number } {
  const edge = Math.ceil(style.haloWidth) + 1
  return { x: edge + width / 2, y: edge + height / 2 }
}
