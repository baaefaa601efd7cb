import type { Palette } from '#shared/design/tokens'
import { placeNames, type PlaceClass } from '../placeNames'
import type { Camera } from './camera'
import { imageCentre, labelImage, layLabel, type LabelLine, type LabelStyle, type LaidLabel } from './labelText'
import { Path } from './path'
import { LabelPlaces, type Candidate } from './placeLabels'
import { shapesOf, type Shape } from './shapes'
import { standsAt } from './trace'

interface MapLabel extends Candidate { label: LaidLabel, name: string, /** Region that it names. */ region: string | null }

const bare = { spacing: 0, lineHeight: 1.2, padding: 6, haloWidth: 1.2 }
/** Distance of the labels on one contour, pixels at most and half as much at least. */
const lineSpacing = 560

/** Labels of regions, contours and the Earth's own places: each gives way to those before it. */
export class MapLabels {
  private readonly writer = document.createElement('canvas').getContext('2d')!
  private readonly places = new LabelPlaces()
  private readonly laid = new Map<string, LaidLabel>()
  private readonly images = new Map<string, HTMLCanvasElement>()
  private readonly names = shapesOf(placeNames())
  private shown: { candidate: MapLabel, x: number, y: number }[] = []

  /** Colours or fonts have changed. */
  forget(): void {
    this.laid.clear()
    this.images.clear()
  }

  /** Finds where everything stands in this view. */
  arrange(regions: readonly Shape[], contours: readonly Shape[], camera: Camera, zoom: number, palette: Palette): void {
    const candidates = [
      ...this.regionLabels(regions, camera, palette),
      ...this.contourLabels(contours, camera, palette),
      ...this.nameLabels(camera, zoom, palette),
    ]
    this.shown = this.places.place(candidates, { width: camera.width, height: camera.height, limb: camera.kind === 'globe' ? camera.limb : null })
  }

  /** Those of the Earth stand below all regions, those of regions above. `ratio` dots of the canvas make a pixel, `screen` those of their own images. */
  paint(pen: CanvasRenderingContext2D, which: 'regions' | 'ground', ratio: number, screen: number): void {
    for (const { candidate, x, y } of this.shown) {
      if ((candidate.region !== null) !== (which === 'regions')) continue
      const image = this.imageOf(candidate, screen)
      const centre = imageCentre(candidate.label)
      const snap = (at: number): number => Math.round(at * ratio) / ratio
      pen.drawImage(image, snap(x - centre.x), snap(y - centre.y), image.width / screen, image.height / screen)
    }
  }

  regionAt(x: number, y: number): string | null {
    return this.shown.find(({ candidate: { region, width, height }, x: cx, y: cy }) => region !== null && Math.abs(x - cx) < width / 2 && Math.abs(y - cy) < height / 2)?.candidate.region ?? null
  }

  private imageOf({ label, name }: MapLabel, ratio: number): HTMLCanvasElement {
    const key = `${ratio} ${name}`
    let image = this.images.get(key)
    if (!image) this.images.set(key, image = labelImage(label, ratio))
    return image
  }

  private candidate(key: string, name: string, texts: LabelLine[], style: LabelStyle, at: { x: number, y: number }, region: string | null): MapLabel {
    let label = this.laid.get(name)
    if (!label) this.laid.set(name, label = layLabel(this.writer, texts, style))
    const { width, height } = label
    return { key, name, label, at, width, height, padding: style.padding, region, anchors: region === null ? 'centre' : 'around', offset: 1.1 * style.size }
  }

  private regionLabels(shapes: readonly Shape[], camera: Camera, palette: Palette): MapLabel[] {
    const style: LabelStyle = { ...bare, size: 12.5, lineHeight: 1.25, widestEm: 11, padding: 4, colour: palette.ink, halo: palette.paper, haloWidth: 1.4 }
    const ranked = [...shapes].sort((a, b) => Number(a.properties.rank) - Number(b.properties.rank))
    return ranked.flatMap(({ properties, points }) => {
      const [name, figure, id] = [String(properties.name), String(properties.figure), String(properties.id)]
      const texts = [{ text: name, scale: 1 }, ...figure ? [{ text: figure, scale: 0.92 }] : []]
      return points.flatMap(point => standsAt(point, camera)).map((at, k) => this.candidate(`region ${id} ${k}`, `region ${name}\n${figure}`, texts, style, at, id))
    })
  }

  private contourLabels(shapes: readonly Shape[], camera: Camera, palette: Palette): MapLabel[] {
    const style: LabelStyle = { ...bare, size: 11.5, widestEm: 20, colour: palette.ink, halo: palette.sea, haloWidth: 1.8 }
    const turn = camera.kind === 'globe' ? camera.radius : camera.world / (2 * Math.PI)
    const spacing = 2 ** Math.floor(Math.log2(lineSpacing / turn))
    return shapes.flatMap(({ properties, lines }, s) => lines.flatMap((line, l) => marksAlong(line, spacing).flatMap((mark, m) =>
      standsAt(mark, camera).map((at, k) => this.candidate(`line ${s} ${l} ${m} ${k}`, `line ${properties.text}`, [{ text: String(properties.text), scale: 1 }], style, at, null)))))
  }

  private nameLabels(camera: Camera, zoom: number, palette: Palette): MapLabel[] {
    return this.names.filter(({ properties }) => zoom >= Number(properties.from))
      .sort((a, b) => Number(a.properties.rank) - Number(b.properties.rank))
      .flatMap(({ properties, points }) => points.flatMap(point => standsAt(point, camera)).map((at, k) => {
        const name = String(properties.name)
        return this.candidate(`name ${name} ${k}`, `name ${name}`, [{ text: name, scale: 1 }], nameStyle(properties.kind as PlaceClass, palette), at, null)
      }))
  }
}

function nameStyle(kind: PlaceClass, palette: Palette): LabelStyle {
  const isLarge = kind === 'ocean' || kind === 'continent'
  return {
    ...bare, widestEm: 9, colour: palette.soft, size: isLarge ? 12 : kind === 'river' ? 10 : 11, spacing: isLarge ? 0.18 : kind === 'sea' ? 0.08 : 0.02,
    halo: kind === 'ocean' || kind === 'sea' || kind === 'lake' ? palette.sea : palette.land,
  }
}

const marks = new WeakMap<Path, Map<number, Path[]>>()

/** Places on a line that stay where they are on the Earth, `spacing` radians apart; none on a line shorter than that. */
function marksAlong(line: Path, spacing: number): Path[] {
  let known = marks.get(line)
  if (!known) marks.set(line, known = new Map())
  const found = known.get(spacing)
  if (found) return found
  const vectors = line.vectors(0)
  const made: Path[] = []
  let gone = 0
  for (let k = 3; k < vectors.length; k += 3) {
    const before = gone
    gone += Math.hypot(vectors[k]! - vectors[k - 3]!, vectors[k + 1]! - vectors[k - 2]!, vectors[k + 2]! - vectors[k - 1]!)
    if (Math.floor(gone / spacing - 0.5) > Math.floor(before / spacing - 0.5)) made.push(new Path([line.places[k / 3]!]))
  }
  known.set(spacing, made)
  return made
}
