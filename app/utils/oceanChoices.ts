import { loadEarthModel } from '#shared/earth/earthModel'
import { oceanModes, type OceanMode } from '#shared/types/domain'

/** The ocean responses that this version computes: those with fields only where the Earth model's default is one of them. */
export function oceanChoices(): { modes: OceanMode[], preferred: OceanMode } {
  const preferred = loadEarthModel().defaultOcean
  const withoutFields: OceanMode[] = ['none', 'uniform']
  return { modes: withoutFields.includes(preferred) ? withoutFields : [...oceanModes], preferred }
}
