import { DEGREE, POLE_MM_PER_MAS } from './constants.ts'
import type { ResponsePerGt } from './response.ts'

/**
 * One independent source of error, by what one sigma of it does to each quantity (Gt, mas, mas, µs, mm). A source that
 * several regions share is one loading: the sum of theirs, since it is fully correlated between them.
 */
export interface Loading { massGt: number, chi1Mas: number, chi2Mas: number, lodMicroseconds: number, barystaticMm: number }

/** One-sigma of the quantities, linear propagation. */
export interface QuantitySigma extends Loading { poleShiftMm: number }

/** What an error of `sigmaGt` in a region's mass does. */
export function loadingOf(response: ResponsePerGt, sigmaGt: number): Loading {
  return {
    massGt: sigmaGt,
    chi1Mas: response.chi1Mas * sigmaGt,
    chi2Mas: response.chi2Mas * sigmaGt,
    lodMicroseconds: response.lodMicroseconds * sigmaGt,
    barystaticMm: response.barystaticMm * sigmaGt
  }
}

/** Adds a loading to the one that a named source has so far. */
export function addShared(bySource: Map<string, Loading>, source: string, loading: Loading): void {
  const sofar = bySource.get(source)
  if (!sofar) {
    bySource.set(source, { ...loading })
    return
  }
  sofar.massGt += loading.massGt
  sofar.chi1Mas += loading.chi1Mas
  sofar.chi2Mas += loading.chi2Mas
  sofar.lodMicroseconds += loading.lodMicroseconds
  sofar.barystaticMm += loading.barystaticMm
}

/**
 * Root of the summed squares over independent loadings. The shift of the pole takes the part along (chi1Mas, chi2Mas);
 * where there is no shift, the longest axis of the error ellipse.
 */
export function sigmaOf(loadings: Iterable<Loading>, chi1Mas: number, chi2Mas: number): QuantitySigma {
  let mass = 0
  let c11 = 0
  let c22 = 0
  let c12 = 0
  let lod = 0
  let barystatic = 0
  for (const loading of loadings) {
    mass += loading.massGt ** 2
    c11 += loading.chi1Mas ** 2
    c22 += loading.chi2Mas ** 2
    c12 += loading.chi1Mas * loading.chi2Mas
    lod += loading.lodMicroseconds ** 2
    barystatic += loading.barystaticMm ** 2
  }
  const length = Math.hypot(chi1Mas, chi2Mas)
  const along = length > 0
    ? (c11 * chi1Mas ** 2 + 2 * c12 * chi1Mas * chi2Mas + c22 * chi2Mas ** 2) / length ** 2
    : (c11 + c22) / 2 + Math.hypot((c11 - c22) / 2, c12)
  return {
    massGt: Math.sqrt(mass),
    chi1Mas: Math.sqrt(c11),
    chi2Mas: Math.sqrt(c22),
    lodMicroseconds: Math.sqrt(lod),
    poleShiftMm: Math.sqrt(Math.max(0, along)) * POLE_MM_PER_MAS,
    barystaticMm: Math.sqrt(barystatic)
  }
}

/** One-sigma of the pole's direction, degrees, from the part of the loadings across it; linear, so only for sigma ≪ shift. */
export function directionSigmaDeg(loadings: Iterable<Loading>, chi1Mas: number, chi2Mas: number): number {
  const length = Math.hypot(chi1Mas, chi2Mas)
  let across = 0
  for (const loading of loadings) across += ((chi1Mas * loading.chi2Mas - chi2Mas * loading.chi1Mas) / length) ** 2
  return Math.sqrt(across) / length / DEGREE
}
