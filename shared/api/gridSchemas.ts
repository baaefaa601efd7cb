import { z } from 'zod'
import { gridLimits } from '../grids/limits.ts'
import { epochFormats } from '../series/epochColumn.ts'
import { productAnswers } from '../series/gridProduct.ts'
import { issue, name, perGt, prose, seriesFacts, sha256, ulid } from './schemas.ts'

const column = z.int().min(0).optional()
export const gridOptions = z.object({
  name,
  /** For a table: which column is what. Left out, columns are recognised by name. */
  csv: z.object({
    lonColumn: column, latColumn: column, timeColumn: column, valueColumn: column, epochFormat: z.enum(epochFormats).optional(),
    units: z.string().trim().max(60).optional(), delimiter: z.string().max(1).optional(), decimalComma: z.boolean().optional(), header: z.boolean().optional(),
    missingValues: z.array(z.string().trim().min(1).max(20)).max(10).optional(),
  }).default({}),
})

const candidate = z.object({
  name: z.string(), longName: z.string().nullable(), units: z.string().nullable(), metresPerUnit: z.number().nullable(),
  epochs: z.int(), rows: z.int(), columns: z.int(),
  /** The unit in words, where it is one of water-equivalent height. */
  reading: z.string().nullable(),
})
export const gridSummary = z.object({
  id: ulid, revision: z.int(), name: z.string(), originalName: z.string(), originalSha256: sha256, bytes: z.number(),
  format: z.enum(['netcdf-classic', 'netcdf-4', 'csv']), createdAt: z.string(), createdBy: z.string().nullable(), canWrite: z.boolean(),
  candidates: z.array(candidate), chosen: z.string().nullable(),
  epochs: z.int(), firstMjd: z.number().nullable(), lastMjd: z.number().nullable(), calendar: z.string().nullable(),
  rowsRead: z.int().nullable(), unusable: z.int(),
})
export const gridDetail = gridSummary.extend({
  /** What the file says of itself. */
  attributes: z.array(z.object({ name: z.string(), text: z.string() })),
  mjd: z.array(z.number()), issues: z.array(issue),
})

/** One month for the map: rows from the south, columns from the west; null where there is no value. */
export const gridMonth = z.object({
  mjd: z.number(), unit: z.string(), metresPerUnit: z.number().nullable(),
  latEdgesDeg: z.array(z.number()), westDeg: z.number(), stepDeg: z.number(), columns: z.int(), values: z.array(z.number().nullable()),
  /** Cells of the file that one of these is the mean of, along each side. */
  merged: z.int(),
})

const further = z.object({ gridId: ulid.nullable().default(null), variable: z.string().min(1).max(200) })
export const gridSeriesRequest = z.object({
  regionIds: z.array(ulid).min(1).max(gridLimits.regions),
  variable: z.string().min(1).max(200),
  /** As people write it; left out, the file’s own. */
  unit: z.string().trim().max(60).optional(),
  /** Which cells are sea: by the engine’s own ocean, by a mask in this file or another grid, or none. */
  sea: z.union([z.enum(['engine', 'none']), further.extend({ of: z.enum(['land', 'sea']) })]).default('engine'),
  scale: further.nullable().default(null),
  /** Part of a region’s cells that may lack a value in a month without the month being left out. */
  mostMissing: z.number().min(0).max(1).default(0),
  leaveOutBadRows: z.boolean().default(false),
})

const effect = z.object({ chi1Mas: z.number(), chi2Mas: z.number(), lodMicroseconds: z.number() })
export const patternSummary = z.object({
  basis: z.enum(['trend', 'variation']), cells: z.int(), movedPart: z.number(), agreement: z.number(),
  /** Effect of one gigatonne gained, with the pattern and spread evenly. */
  perGt: z.object({ pattern: effect, even: effect }),
})
export const gridSeriesPreview = z.object({
  gridId: ulid, accepted: z.boolean(),
  regions: z.array(z.object({
    regionId: ulid, name: z.string(), mjd: z.array(z.number()), massGt: z.array(z.number()),
    trend: z.object({ value: z.number(), sigma: z.number() }).nullable(),
    areaM2: z.number(), usedM2: z.number(), seaM2: z.number(), missingM2: z.number(), outsideM2: z.number(), cells: z.int(),
    issues: z.array(issue), issueCount: z.int(), steps: z.array(z.string()), pattern: patternSummary.nullable(),
  })),
})

const productAnswer = z.object({ answer: z.enum(productAnswers), note: z.string().trim().max(400).default('') })
export const gridAcceptance = z.object({
  /** The regions whose series are stored; left out, all. */
  regionIds: z.array(ulid).min(1).max(gridLimits.regions).optional(),
  name, reason: prose.default(''), source: prose.min(1, 'is empty'), licence: prose.default(''), independence: prose.default(''),
  facts: seriesFacts.nullable().default(null),
  /** Of a gravity product; null for any other grid. */
  product: z.object({ degreeOne: productAnswer, c20: productAnswer, c30: productAnswer, isostatic: productAnswer, leakage: productAnswer }).nullable(),
  /** One-sigma of a region’s mean height in each month, mm of water. */
  sigmaMm: z.number().min(0).max(10_000).nullable().default(null),
  /** Systematic errors of the trend of the mean height, mm of water per year, by named source. */
  sharedRates: z.array(z.object({ source: name, sigmaMmPerYear: z.number().min(0).max(10_000) })).max(20).default([]),
})

/** What a grid’s pattern changes for one region, as its page shows it. */
export const evenSpread = z.object({ basis: z.enum(['trend', 'variation']), cells: z.int(), movedPart: z.number(), perGt, sentences: z.array(z.string()) })

const distribution = z.object({ mean: z.number(), sigma: z.number(), p2_5: z.number(), p16: z.number(), p50: z.number(), p84: z.number(), p97_5: z.number() })
const checked = z.object({ linear: z.object({ value: z.number(), sigma: z.number() }), sampled: distribution, agrees: z.boolean() })
export const monteCarloRequest = z.object({ members: z.int().min(100).max(gridLimits.members).default(10_000), seed: z.int().min(0).max(4_294_967_295).default(1) })
/** Sampled beside linear errors of the trends of a run, per year. */
export const monteCarloView = z.object({
  members: z.int(), seed: z.int(), createdAt: z.string(), sentence: z.string(),
  total: z.object({ massGt: checked, lodMicroseconds: checked, chi1Mas: checked, chi2Mas: checked }),
  drift: z.object({ lengthMas: distribution, linearLengthMas: z.number(), directionDegEast: z.number().nullable(), turnDeg: distribution }),
  regions: z.array(z.object({ key: z.string(), name: z.string(), massGt: checked })),
})
