import type { OceanMode } from '../../types/domain.ts'
import type { DerivedRates, ModelUncertaintyRate, RunInput } from '../../types/run.ts'
import { derivedOf, derivedOfMoments, type DerivedPerGt } from '../derived.ts'
import type { EarthModel } from '../earthModel.ts'
import { modelUncertainty } from '../modelUncertainty.ts'
import { functional, type MassRates } from './budget.ts'
import type { FittedRegion } from './run.ts'

/** Rates of ΔC₂₁, ΔS₂₁ and of the geocentre for regions together, what they keep on land included; linear in the mass rates, so with their errors. */
export function derivedRates(fitted: readonly FittedRegion[], rates: MassRates, ocean: OceanMode, model: EarthModel): DerivedRates {
  const own = fitted.map(f => derivedOf(f.contour, model, ocean))
  const kept = fitted.map(f => f.kept ? { factor: f.kept.effect.massGt, per: derivedOfMoments(f.kept.moments, ocean) } : null)
  const rate = (pick: (derived: DerivedPerGt) => number) => functional(rates, Float64Array.from(own, (derived, i) => {
    const rest = kept[i]
    return pick(derived) + (rest ? rest.factor * pick(rest.per) : 0)
  }))
  return {
    deltaC21PerYear: rate(d => d.deltaC21),
    deltaS21PerYear: rate(d => d.deltaS21),
    geocentreMmPerYear: ocean === 'none' ? null : { x: rate(d => d.geocentreMm!.x), y: rate(d => d.geocentreMm!.y), z: rate(d => d.geocentreMm!.z) }
  }
}

/** The model's own lines of uncertainty for the sum of the regions, per year; what is spread over all land has no line of its own. */
export function modelUncertaintyRates(fitted: readonly FittedRegion[], rates: MassRates, settings: RunInput['settings'], model: EarthModel): ModelUncertaintyRate[] {
  const loads = fitted.flatMap((f, i) => {
    const target = f.kept?.target
    return [
      { contour: f.contour, massGt: rates.value[i]! },
      ...(target ? [{ contour: target.contour, massGt: f.kept!.effect.massGt * rates.value[i]! }] : [])
    ]
  }).filter(load => load.massGt !== 0)
  return modelUncertainty(loads, settings, model).map(({ id, name, text, chi1Mas, chi2Mas, lodMicroseconds }) => ({
    id, name, text, chi1MasPerYear: chi1Mas, chi2MasPerYear: chi2Mas, lodMicrosecondsPerYear: lodMicroseconds
  }))
}
