import { GEOCENTRE_FRAME } from '../../earth/derived.ts'
import { POLE_MM_PER_MAS } from '../../earth/constants.ts'
import { formatSignificant } from '../../format/digits.ts'
import { formatMeasured } from '../../format/measured.ts'
import type { Measured } from '../../types/domain.ts'
import type { RunResult } from '../../types/run.ts'

export interface DerivedTableRow { id: string, name: string, value: string, sigma: string, unit: string }

/** What the derived quantities are relative to and normalised by. */
export const derivedNote = `ΔC₂₁ and ΔS₂₁ are fully normalised, ΔJ₂ is not; all three for a radius of 6371\u00a0km, with the yielding of the Earth. The geocentre is the ${GEOCENTRE_FRAME}.`

/** Rates of sea level, gravity field and centre of mass for the sum of the regions; what a run does not hold is left out. */
export function derivedTable({ total }: RunResult): DerivedTableRow[] {
  const row = (id: string, name: string, rate: Measured | null | undefined, unit: string, factor = 1): DerivedTableRow[] => {
    if (!rate) return []
    const { value, sigma } = formatMeasured(rate.value * factor, rate.sigma * factor)
    return [{ id, name, value, sigma, unit }]
  }
  const centre = total.derived?.geocentreMmPerYear
  return [
    ...row('barystatic', 'Barystatic sea level', total.barystaticMmPerYear, 'mm/yr'),
    ...row('j2', 'ΔJ₂', total.deltaJ2PerYear, '10⁻¹¹/yr', 1e11),
    ...row('c21', 'ΔC₂₁', total.derived?.deltaC21PerYear, '10⁻¹¹/yr', 1e11),
    ...row('s21', 'ΔS₂₁', total.derived?.deltaS21PerYear, '10⁻¹¹/yr', 1e11),
    ...row('x', 'Geocentre x, towards Greenwich', centre?.x, 'mm/yr'),
    ...row('y', 'Geocentre y, towards 90° E', centre?.y, 'mm/yr'),
    ...row('z', 'Geocentre z, towards north', centre?.z, 'mm/yr'),
  ]
}

/** Why rows of the derived quantities are missing; null where none is. */
export function derivedMissing({ total, settings }: RunResult): string | null {
  if (!total.derived) return 'This run was made by an earlier engine, which did not compute ΔC₂₁, ΔS₂₁ and the geocentre; a new run of the scenario has them.'
  return settings.ocean === 'none' ? 'Without an ocean response there is no geocentre: the sea’s part of the mass is missing.' : null
}

export interface UncertaintyTableRow {
  id: string
  name: string
  text: string
  /** ΔLOD in µs per year; χ₁, χ₂ in mas per year; length of the pole's part in cm per year. */
  cells: [lod: string, chi1: string, chi2: string, pole: string]
}

export const uncertaintyColumns = [
  { id: 'lod', name: 'ΔLOD', unit: 'µs/yr' },
  { id: 'chi1', name: 'χ₁', unit: 'mas/yr' },
  { id: 'chi2', name: 'χ₂', unit: 'mas/yr' },
  { id: 'pole', name: 'pole', unit: 'cm/yr' },
] as const

const size = (value: number) => formatSignificant(value, 2)
const cells = (lod: number, chi1: number, chi2: number): UncertaintyTableRow['cells'] =>
  [size(lod), size(chi1), size(chi2), size(Math.hypot(chi1, chi2) * POLE_MM_PER_MAS / 10)]

/** The model's own uncertainty, line by line; it is part of no sigma. Empty for runs of earlier engines. */
export function modelUncertaintyTable({ modelUncertainty }: RunResult): UncertaintyTableRow[] {
  return (modelUncertainty ?? []).map(({ id, name, text, lodMicrosecondsPerYear, chi1MasPerYear, chi2MasPerYear }) => ({
    id, name, text, cells: cells(lodMicrosecondsPerYear, chi1MasPerYear, chi2MasPerYear),
  }))
}

/** One sigma of the data for the sum, to be read beside the lines of the model. Null where the run is too short for trends. */
export function dataUncertaintyRow({ total }: RunResult): UncertaintyTableRow | null {
  const { lodMicrosecondsPerYear: lod, chi1MasPerYear: chi1, chi2MasPerYear: chi2 } = total
  return lod && chi1 && chi2
    ? { id: 'data', name: 'Data, one sigma', text: 'Mass series with their noise, and errors that series share; this is the ± of every other figure.', cells: cells(lod.sigma, chi1.sigma, chi2.sigma) }
    : null
}

/** Why the lines stand apart. */
export const uncertaintyNote = 'Each line is what another choice of the model would change for this result. The lines are no one-sigma errors, are not independent, and are added neither to one another nor to the ± of the data.'
