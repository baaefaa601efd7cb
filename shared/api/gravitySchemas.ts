import { z } from 'zod'
import { dealiasingStates, meanPoles, permanentTides, poleTideStates } from '../observed/gravityTypes.ts'

/** What the numbers of a series of gravity coefficients do not say; asked when it is stored. */
export const gravityFields = z.strictObject({
  solidPoleTide: z.enum(poleTideStates), oceanPoleTide: z.enum(poleTideStates), permanentTide: z.enum(permanentTides), meanPole: z.enum(meanPoles),
  /** Metres. */
  radiusM: z.number().min(6.35e6, 'must be in metres, like 6378136.3').max(6.4e6, 'must be in metres, like 6378136.3'),
  dealiasing: z.enum(dealiasingStates), axialLoadFactor: z.literal([0.695, 0.684]),
})
