import { z } from 'zod'

export const seaLevelQuery = z.object({
  /** Rotational feedback, on by default for maps of the sea. */
  feedback: z.enum(['true', 'false']).default('true').transform(text => text === 'true'),
  step: z.enum(['1', '2', '3', '5']).default('2').transform(Number),
  /** Places as latitude,longitude;latitude,longitude. */
  at: z.string().max(2000).optional(),
})
export const seaLevelAnswer = z.object({
  unit: z.enum(['mm per year', 'mm per 100 Gt lost']), feedback: z.boolean(), degree: z.int(), barystaticMm: z.number(), stepDeg: z.number(),
  latitudesDeg: z.array(z.number()), longitudesDeg: z.array(z.number()), seaLevelMm: z.array(z.number()), sea: z.array(z.number()),
  places: z.array(z.object({ latitudeDeg: z.number(), longitudeDeg: z.number(), seaLevelMm: z.number(), relative: z.number().nullable() })),
})
