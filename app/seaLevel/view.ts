import { formatSignificant } from '#shared/format/numbers'
import { seaLevelContours } from '#shared/figures/seaLevel/seaLevelContours'
import { seaLevelFacts } from '#shared/figures/seaLevel/seaLevelFacts'
import { seaLevelSentence } from '#shared/text/seaLevel'
import type { AnswerOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'
import type { SeaLevelField } from '#shared/figures/seaLevel/levels'
import type { MapRegion } from '#shared/figures/map/mapFigure'
import type { SeaLevelMapData } from '#shared/figures/seaLevel/seaLevelFigure'
import type { Position } from '#shared/types/domain'
import type { SeaLevelQuestion } from './question'

export type SeaLevelAnswer = AnswerOf<typeof contracts.runSeaLevel>

export interface SeaLevelPlace { mark: string, position: Position, mm: number, relative: number | null, inland: boolean }

/** What the page of a sea-level map shows, without the grid it was made of. */
export interface SeaLevelView {
  sentence: string
  map: Omit<SeaLevelMapData, 'land'>
  places: SeaLevelPlace[]
  /** Unit of the values: `mm per year`, or `mm` for a hundred gigatonnes. */
  unit: string
  meanMm: number
  degree: number
  /** False where loads sum to no mass: nothing is relative to that. */
  hasMean: boolean
}

interface Subject {
  /** Begins the sentence. */
  subject: string
  /** Unit in the sentence and the table. */
  unit: string
  sigma: number | null
  only?: string
}

/** Lines, zones, sentence and places of an answer: a tenth of what the grid would carry to the browser. */
export function seaLevelView(answer: SeaLevelAnswer, regions: MapRegion[], { as }: SeaLevelQuestion, { subject, unit, sigma, only }: Subject): SeaLevelView {
  const field: SeaLevelField = { latitudesDeg: answer.latitudesDeg, longitudesDeg: answer.longitudesDeg, value: answer.seaLevelMm, sea: answer.sea }
  const facts = seaLevelFacts(field, answer.barystaticMm, regions.map(({ name, geometry, massGtPerYear }) => ({ name, geometry, mass: massGtPerYear })))!
  const sentence = seaLevelSentence({ subject, facts, unit, sigma, only })
  const mean = facts.mean
  const relative = as === 'mean' && mean !== null
  const contours = relative
    ? seaLevelContours({ ...field, value: field.value.map(value => value / mean) }, 1)
    : seaLevelContours(field, mean)
  const places = answer.places.map((place, i): SeaLevelPlace => ({
    mark: String(i + 1),
    position: [place.longitudeDeg, place.latitudeDeg],
    mm: place.seaLevelMm,
    relative: mean === null ? null : place.relative,
    inland: seaAt(field, place.longitudeDeg, place.latitudeDeg) < 0.05,
  }))
  return {
    sentence,
    map: {
      contours,
      unit: relative ? `= ${formatSignificant(mean, 3)}\u00a0${unit}` : unit,
      regions,
      places: places.map(({ mark, position }) => ({ mark, position })),
      description: sentence,
    },
    places,
    unit,
    meanMm: answer.barystaticMm,
    degree: answer.degree,
    hasMean: mean !== null,
  }
}

/** Part of the sea round a place, between the nodes. */
function seaAt({ latitudesDeg, longitudesDeg, sea }: SeaLevelField, lon: number, lat: number): number {
  const step = latitudesDeg[1]! - latitudesDeg[0]!
  const [x, y] = [(lon + 180) / step, (lat + 90) / step]
  const [j, i] = [Math.min(Math.floor(x), longitudesDeg.length - 2), Math.min(Math.floor(y), latitudesDeg.length - 2)]
  const at = (row: number, column: number) => sea[row * longitudesDeg.length + column]!
  const [p, q] = [x - j, y - i]
  return (1 - p) * (1 - q) * at(i, j) + p * (1 - q) * at(i, j + 1) + (1 - p) * q * at(i + 1, j) + p * q * at(i + 1, j + 1)
}
