import { z } from 'zod'
import { coefficientSetIds, coreChoices, oceanModes } from '../types/domain.ts'
import { geometry, limits, measured, warning } from './schemas.ts'

const gt = z.number()
const sigmaGt = z.number().min(0)

export const evaluateRequest = z.object({
  regions: z.array(z.object({
    id: z.string().min(1).max(limits.nameLength),
    geometry,
    massGt: gt.optional(),
    sigmaGt: sigmaGt.optional(),
    shared: z.array(z.object({ source: z.string().min(1).max(limits.nameLength), sigmaGt })).max(100).optional(),
    series: z.object({
      epochs: z.array(z.union([z.string().max(40), z.number()])).max(limits.epochs),
      massGt: z.array(gt).max(limits.epochs),
      sigmaGt: z.array(sigmaGt).max(limits.epochs).nullable().optional(),
    }).optional(),
  })).min(1).max(limits.regions),
  // Strict: a setting that is not known is a fault, never ignored.
  settings: z.strictObject({
    ocean: z.enum(oceanModes).optional(),
    coefficients: z.enum(coefficientSetIds).optional(),
    core: z.enum(coreChoices).optional(),
  }).optional(),
})

const figure = z.union([z.number(), z.array(z.number())])
const sigma = z.object({
  massGt: figure, chi1Mas: figure, chi2Mas: figure, lodMicroseconds: figure, poleShiftMm: figure, barystaticMm: figure,
})
const direction = z.union([z.number().nullable(), z.array(z.number().nullable())])
const totals = z.object({
  massGt: figure, chi1Mas: figure, chi2Mas: figure, chi3: figure, lodMicroseconds: figure, poleShiftMm: figure,
  poleDirectionDegEast: direction, barystaticMm: figure, deltaJ2: figure, sigma,
  trend: z.object({
    massGt: measured, chi1Mas: measured, chi2Mas: measured, lodMicroseconds: measured, barystaticMm: measured, poleShiftMm: measured,
    poleDirectionDegEast: measured.nullable(),
  }).optional(),
})

export const evaluateAnswer = z.object({
  settings: z.object({
    ocean: z.enum(oceanModes), coefficients: z.enum(coefficientSetIds), core: z.enum(coreChoices), engineVersion: z.string(), oceanAreaM2: z.number(),
  }),
  epochs: z.array(z.union([z.string(), z.number()])).optional(),
  warnings: z.array(warning),
  regions: z.array(totals.extend({ id: z.string(), areaKm2: z.number(), centroid: z.tuple([z.number(), z.number()]) })),
  total: totals,
})
