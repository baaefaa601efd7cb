import { InputError, type Issue } from '../../types/issue.ts'
import type { RunInput } from '../../types/run.ts'
import { coefficientsOf, responseToMoments } from '../response.ts'
import type { Contour } from '../contour.ts'
import type { EarthModel } from '../earthModel.ts'
import { landMoments } from '../landResponse.ts'
import { netMoments, type NetMoments } from '../netMoments.ts'
import type { EffectPerGt } from './budget.ts'
import type { FittedRegion } from './run.ts'

const quantities = ['chi1Mas', 'chi2Mas', 'chi3', 'lodMicroseconds', 'barystaticMm', 'deltaJ2'] as const

/** What becomes of the part of a region's water that does not reach the sea. */
export interface KeptOnLand {
  /** Its effect per gigatonne of the region's series: of opposite sign to a gain there, `massGt` the part itself, negative. */
  effect: EffectPerGt
  /** Moments of one gigatonne gained where it is kept, the sea's answer included. */
  moments: NetMoments
  /** The region that gains it; null for all land evenly. */
  target: { name: string, contour: Contour } | null
}

/**
 * Gives each region whose water does not all reach the sea the effect of the rest: gained by another region of the run, or by
 * all land evenly. A region's own row stays what it is without this; the kept part is of opposite sign and adds to it.
 *
 * @throws InputError for a part outside 0 to 1 and for a target that is not another region of the run
 */
export function keptOnLand(fitted: readonly FittedRegion[], settings: RunInput['settings'], model: EarthModel): FittedRegion[] {
  const issues: Issue[] = []
  const part = (f: FittedRegion, i: number, name: 'fractionToOcean' | 'groundedFraction'): number => {
    const value = f.region[name] ?? 1
    if (!(value >= 0 && value <= 1)) issues.push({ path: `regions/${i}/${name}`, code: 'range', message: `${f.region.name}: must be between 0 and 1, got ${value}.` })
    return value
  }
  let land: NetMoments | null = null
  const withKept = fitted.map((f, i) => {
    part(f, i, 'groundedFraction')
    const rest = 1 - part(f, i, 'fractionToOcean')
    if (rest === 0) return f
    const key = f.region.restTo ?? null
    const other = fitted.find(candidate => candidate !== f && candidate.region.key === key)
    if (key !== null && !other) issues.push({ path: `regions/${i}/restTo`, code: 'unknown', message: `${f.region.name}: “${key}” is not another region of this run.` })
    const moments = other ? netMoments(other.contour, model, settings.ocean) : (land ??= landMoments(model, settings.ocean))
    const response = responseToMoments(moments, model, coefficientsOf(settings))
    return { ...f, kept: { effect: scaledEffect({ ...response, massGt: 1 }, -rest), moments, target: other ? { name: other.region.name, contour: other.contour } : null } }
  })
  if (issues.length > 0) throw new InputError('Where the water goes is not said rightly', issues)
  return withKept
}

/** An effect times a factor. */
export function scaledEffect(of: EffectPerGt, factor: number): EffectPerGt {
  const effect = { ...of, massGt: factor * of.massGt }
  for (const name of quantities) effect[name] = factor * of[name]
  return effect
}

/** What one gigatonne of the series does as the region's own row counts it. */
export function ownEffect(f: FittedRegion): EffectPerGt {
  return { ...f.response, massGt: 1 }
}

/** The same with what is kept on land and what is taken off others that hold the same mass: what the sum counts. */
export function netEffect(f: FittedRegion): EffectPerGt {
  const effect = ownEffect(f)
  for (const more of [...f.kept ? [f.kept] : [], ...f.taken]) {
    effect.massGt += more.effect.massGt
    for (const name of quantities) effect[name] += more.effect[name]
  }
  return effect
}
