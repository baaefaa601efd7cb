import { coefficientSets } from '../earth/coefficientSets.ts'
import { CHANDLER_PERIOD_DAYS, CHANDLER_Q, EARTH_RADIUS_M } from '../earth/constants.ts'
import { formatNumber } from '../format/digits.ts'
import type { CoefficientSetId, CoreChoice, OceanMode, PhysicsSettings } from '../types/domain.ts'

export interface OceanText {
  name: string
  /** Two sentences: what is done, and what that means. */
  text: string
}

/** The ocean modes in words. */
export const oceanTexts: Readonly<Record<OceanMode, OceanText>> = {
  'none': {
    name: 'no ocean response',
    text: 'The region’s mass change stands alone and nothing answers for it elsewhere. Mass is not conserved, so this is a diagnostic and not a result.',
  },
  'uniform': {
    name: 'uniform ocean response',
    text: 'What leaves a region is spread evenly over the ocean, and what a region gains is drawn evenly from it. Mass is conserved; the pattern of sea-level change, with its fall beside shrinking ice, is left out.',
  },
  'fingerprint': {
    name: 'fingerprint ocean response',
    text: 'What leaves a region is spread over the ocean as gravity and the elastic Earth require, by the sea-level equation with fixed shorelines. Rotational feedback stays out, because the excitation coefficients already contain the ocean’s response to polar motion.',
  },
  'fingerprint-rotation': {
    name: 'fingerprint ocean response with rotational feedback',
    text: 'As the fingerprint, with the change of sea level that polar motion itself makes. The excitation then uses the coefficient without the ocean pole tide, so that this part is not counted twice.',
  },
}

/** The core choices in words. */
export const coreTexts: Readonly<Record<CoreChoice, OceanText>> = {
  decoupled: {
    name: 'core decoupled',
    text: 'The mantle alone takes up the change of spin, as holds from days to years. The effect on the day is then 21 % larger than with the whole Earth.',
  },
  coupled: {
    name: 'core coupled',
    text: 'The whole Earth takes up the change of spin, as secular estimates of tides, eclipses and isostatic adjustment assume. The pole is not affected by this choice.',
  },
}

/** The coefficient sets, each with its source. */
export const coefficientTexts: Readonly<Record<CoefficientSetId, { name: string, source: string }>> = coefficientSets

/** The settings of a run on one line. */
export function settingsLine(settings: PhysicsSettings): string {
  return [oceanTexts[settings.ocean].name, coreTexts[settings.core].name, coefficientTexts[settings.coefficients].name].join(', ')
}

export interface MethodSection { heading: string, text: string }

/** The method of a run in words, section by section. */
export function methodSections(settings: PhysicsSettings, compared: boolean): MethodSection[] {
  const coefficients = coefficientTexts[settings.coefficients]
  const sections: MethodSection[] = [
    {
      heading: 'Load',
      text: `Each region’s mass is uniform over its outline. Outlines are read as WGS 84 longitude and geodetic latitude with straight edges between vertices, mapped to geocentric latitude on a sphere of ${formatNumber(EARTH_RADIUS_M / 1000)}\u00a0km; areas are those of the ellipsoid. The moments of an outline are exact contour integrals.`,
    },
    { heading: 'Ocean', text: oceanTexts[settings.ocean].text },
    {
      heading: 'Excitation',
      text: `The change of the inertia tensor gives χ₁ (towards Greenwich), χ₂ (towards 90° E) and the excess length of day, with the coefficients of ${coefficients.name}. They contain the Earth’s yielding under the load. Above one year the pole follows the excitation, so its drift is the trend of χ.`,
    },
    { heading: 'Core', text: coreTexts[settings.core].text },
    {
      heading: 'Trends and uncertainty',
      text: 'Trends are weighted least-squares fits over the span, per Julian year of 365.25 days, with annual and semiannual terms from two years on. Their one-sigma is scaled by the residuals and widened by the square root of (1 + r₁)/(1 − r₁), r₁ being the lag-one autocorrelation. A source of error that several series share is fully correlated between them and adds linearly in the sum.',
    },
    {
      heading: 'Accuracy of the model',
      text: 'Beyond the uncertainty of the data, the model itself is good to some 0.2 to 0.4 % for the sphere in place of the ellipsoid, and 1 to 2 % for the anelastic response over decades. On centuries the mantle also flows, which is not modelled.',
    },
  ]
  if (compared) {
    sections.push({
      heading: 'Comparison',
      text: `Observed excitation and model are monthly means over their common span, each relative to its own mean. The residual is observed minus model. The observed excitation of the pole is made from reported polar motion, χ = p + (i/σ) dp/dt with p = x − iy, for a Chandler period of ${formatNumber(CHANDLER_PERIOD_DAYS)} days and Q = ${formatNumber(CHANDLER_Q)}.`,
    })
  }
  return sections
}
