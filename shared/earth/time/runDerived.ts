import type { OceanMode } from '../../types/domain.ts'
import type { DerivedRates, ModelUncertaintyRate, RunInput } from '../../types/run.ts'
import type { Contour } from '../contour.ts'
import { derivedOf, derivedOfMoments, type DerivedPerGt } from '../derived.ts'
import type { EarthModel } from '../earthModel.ts'
import { modelUncertainty } from '../modelUncertainty.ts'
import { functional, type MassRates } from './budget.ts'
import type { FittedRegion } from './run.ts'

/** Rates of ΔC₂₁, ΔS₂₁ and of the geocentre for regions together, what they keep on land and take off each other included; linear in the mass rates, so with their errors. */
export function derivedRates(fitted: readonly FittedRegion[], rates: MassRates, ocean: OceanMode, model: EarthModel): DerivedRates {
  const partsOf = (f: FittedRegion): { factor: number, per: DerivedPerGt }[] => [
    { factor: 1, per: derivedOf(f.contour, model, ocean) },
    ...(f.kept ? [{ factor: f.kept.effect.massGt, per: derivedOfMoments(f.kept.moments, ocean) }] : []),
    ...f.taken.flatMap(({ from, factor }) => partsOf({ ...from, taken: [] }).map(part => ({ ...part, factor: factor * part.factor })))
  ]
  const parts = fitted.map(partsOf)
  const rate = (pick: (derived: DerivedPerGt) => number) => functional(rates, Float64Array.from(parts, list => list.reduce((sum, { factor, per }) => sum + factor * pick(per), 0)))
  return {
    deltaC21PerYear: rate(d => d.deltaC21),
    deltaS21PerYear: rate(d => d.deltaS21),
    geocentreMmPerYear: ocean === 'none' ? null : { x: rate(d => d.geocentreMm!.x), y: rate(d => d.geocentreMm!.y), z: rate(d => d.geocentreMm!.z) }
  }
}

/** The model's own lines of uncertainty for the sum of the regions, per year; what is spread over all land has no line of its own. */
export function modelUncertaintyRates(fitted: readonly FittedRegion[], rates: MassRates, settings: RunInput['settings'], model: EarthModel): ModelUncertaintyRate[] {
  const loadsOf = (f: FittedRegion, massGt: number): { contour: Contour, massGt: number }[] => [
    { contour: f.contour, massGt },
    ...(f.kept?.target ? [{ contour: f.kept.target.contour, massGt: f.kept.effect.massGt * massGt }] : []),
    ...f.taken.flatMap(({ from, factor }) => loadsOf({ ...from, taken: [] }, factor * massGt))
  ]
  const loads = fitted.flatMap((f, i) => loadsOf(f, rates.value[i]!)).filter(load => load.massGt !== 0)
  return modelUncertainty(loads, settings, model).map(({ id, name, text, chi1Mas, chi2Mas, lodMicroseconds }) => ({
    id, name, text, chi1MasPerYear: chi1Mas, chi2MasPerYear: chi2Mas, lodMicrosecondsPerYear: lodMicroseconds
  }))
}
