import { secularPole } from '../../earth/time/secularPole.ts'
import type { PolePath } from '../drift/polePathFigure.ts'
import type { FigureSeries } from './data.ts'

/** What is said where it is drawn. */
export const secularNote = 'Dotted: the secular pole of the IERS Conventions (2010, update of 2018). It is the observed drift itself, so it is drawn and never subtracted.'

const label = 'secular pole'
const parts = 48
const evenly = (from: number, to: number) => Array.from({ length: parts + 1 }, (_, i) => from + (to - from) * i / parts)

/** The secular pole beside a component of the pole (x, y) or of its excitation (χ₁ = x, χ₂ = −y), mas, over the span of some epochs. */
export function secularLine(quantity: 'x' | 'y' | 'chi1' | 'chi2', mjd: readonly number[], zero: 'as it is' | 'about its mean' = 'as it is'): FigureSeries {
  const at = (t: number) => {
    const { xMas, yMas } = secularPole(t)
    return quantity === 'chi2' ? -yMas : quantity === 'y' ? yMas : xMas
  }
  const epochs = mjd.length > 1 ? evenly(mjd[0]!, mjd.at(-1)!) : [...mjd]
  const mean = zero === 'about its mean' && mjd.length > 0 ? mjd.reduce((sum, t) => sum + at(t), 0) / mjd.length : 0
  return { label, role: 'secular', mjd: epochs, value: epochs.map(t => at(t) - mean) }
}

/** The way of the secular pole over the pole plane. */
export function secularPath(fromMjd: number, toMjd: number): PolePath {
  const mjd = evenly(fromMjd, toMjd)
  return { label, role: 'secular', mjd, chi1: mjd.map(t => secularPole(t).xMas), chi2: mjd.map(t => -secularPole(t).yMas) }
}
