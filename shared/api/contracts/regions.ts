import { z } from 'zod'
import { oceanModes } from '../../types/domain.ts'
import { contract } from '../contract.ts'
import { fitAnswer, fitQuery } from '../fitSchemas.ts'
import { evenSpread } from '../gridSchemas.ts'
import {
  geometry, limits, listOf, name, page, perGt, prose, region, regionKind, regionMonths, regionTotal, revision, sha256, trendSummary, ulid,
  versionSummary,
} from '../schemas.ts'
import { seaLevelQuery, seaLevelAnswer } from '../seaLevelSchemas.ts'
import { inWorkspace, byId, changed, bytes } from './common.ts'

/** Regions and what a unit of their mass does. */
export const regionContracts = {
  regionList: contract({ id: 'regionList', method: 'GET', path: '/api/v1/workspaces/{workspace}/regions', action: 'region.read', summary: 'Regions', params: inWorkspace, query: page.extend({ bin: z.enum(['only']).optional() }), answer: listOf(region) }),
  regionTotal: contract({
    id: 'regionTotal', method: 'GET', path: '/api/v1/workspaces/{workspace}/regions/total', action: 'region.read',
    summary: 'What the latest trends of all regions add up to, shared errors once, with the overlaps to be known before any sum', params: inWorkspace, answer: regionTotal,
  }),
  regionMonths: contract({
    id: 'regionMonths', method: 'GET', path: '/api/v1/workspaces/{workspace}/regions/months', action: 'region.read',
    summary: 'Monthly mass of every region that has a series, relative to its own mean, Gt; null in a gap', params: inWorkspace, answer: regionMonths,
  }),
  errorSourceList: contract({
    id: 'errorSourceList', method: 'GET', path: '/api/v1/workspaces/{workspace}/error-sources', action: 'region.read',
    summary: 'Named sources of systematic error; the same name in two series is the same error', params: inWorkspace, answer: listOf(z.object({ id: ulid, name: z.string() })),
  }),
  regionCreate: contract({
    id: 'regionCreate', method: 'POST', path: '/api/v1/workspaces/{workspace}/regions', action: 'region.write', summary: 'Add a region', params: inWorkspace,
    body: z.object({ name, kind: regionKind, agencyId: ulid, note: prose.default(''), geometry }), answer: region, status: 201, maxBytes: limits.evaluateBytes,
  }),
  regionCreateMany: contract({
    id: 'regionCreateMany', method: 'POST', path: '/api/v1/workspaces/{workspace}/regions/batch', action: 'region.write', summary: 'Add several regions: all of them or, where one does not hold, none', params: inWorkspace,
    body: z.object({ agencyId: ulid, regions: z.array(z.object({ name, kind: regionKind, note: prose.default(''), geometry })).min(1).max(limits.outlines) }),
    answer: listOf(z.object({ id: ulid, revision, name: z.string() })), status: 201, maxBytes: limits.outlinesBytes,
  }),
  regionRemoveMany: contract({
    id: 'regionRemoveMany', method: 'POST', path: '/api/v1/workspaces/{workspace}/regions/bin', action: 'region.write', summary: 'Put several regions in the bin: all of them or none', params: inWorkspace,
    body: z.object({ regions: z.array(z.object({ id: ulid, revision })).min(1).max(limits.outlines) }), answer: listOf(z.object({ id: ulid, revision })),
  }),
  regionRead: contract({
    id: 'regionRead', method: 'GET', path: '/api/v1/regions/{id}', action: 'region.read', summary: 'A region', params: byId,
    answer: region.extend({
      perGt, outlines: z.array(z.object({ n: z.int(), areaKm2: z.number(), sha256, createdAt: z.string(), createdBy: z.string().nullable() })),
      versions: z.array(versionSummary), overlaps: z.array(z.object({ id: ulid, name: z.string(), areaKm2: z.number(), share: z.number(), shareOfOther: z.number() })), settings: z.looseObject({}),
      /** Whether the newest series comes from a grid, so that effects are those of its pattern and not of an even spread. */
      patterned: z.boolean(),
      /** Effect of one gigatonne gained with its derived quantities, by ocean response. */
      effects: z.array(perGt.extend({
        ocean: z.enum(oceanModes), deltaC21: z.number(), deltaS21: z.number(), geocentreMm: z.object({ x: z.number(), y: z.number(), z: z.number() }).nullable(),
      })),
    }),
  }),
  regionChange: contract({
    id: 'regionChange', method: 'PATCH', path: '/api/v1/regions/{id}', action: 'region.write', summary: 'Change a region; a new geometry becomes a new outline version', params: byId,
    body: z.object({ revision, name: name.optional(), kind: regionKind.optional(), agencyId: ulid.optional(), note: prose.optional(), geometry: geometry.optional() }),
    answer: region, maxBytes: limits.evaluateBytes,
  }),
  regionRemove: contract({
    id: 'regionRemove', method: 'DELETE', path: '/api/v1/regions/{id}', action: 'region.write', summary: 'Put a region in the bin', params: byId,
    query: z.object({ revision: z.coerce.number().int() }), answer: changed,
  }),
  regionRestore: contract({
    id: 'regionRestore', method: 'POST', path: '/api/v1/regions/{id}/restore', action: 'region.write', summary: 'Take a region out of the bin', params: byId,
    body: z.object({ revision }), answer: changed,
  }),
  regionPrediction: contract({
    id: 'regionPrediction', method: 'GET', path: '/api/v1/regions/{id}/prediction', action: 'region.read', summary: 'Predicted ΔLOD and pole of one region from a series version', params: byId,
    query: z.object({ version: ulid.optional(), ocean: z.enum(oceanModes).optional() }),
    answer: z.object({
      version: versionSummary, settings: z.looseObject({}), perGt, mjd: z.array(z.number()), massGt: z.array(z.number()), sigmaMassGt: z.array(z.number().nullable()),
      lodMicroseconds: z.array(z.number()), chi1Mas: z.array(z.number()), chi2Mas: z.array(z.number()), trend: trendSummary.nullable(), warnings: z.array(z.string()),
      /** Of a version from a grid: `perGt` is with the grid’s pattern, this is without. */
      evenSpread: evenSpread.nullable(),
    }),
  }),
  regionFit: contract({
    id: 'regionFit', method: 'GET', path: '/api/v1/regions/{id}/fit', action: 'region.read',
    summary: 'Fit of a series version: chosen terms with errors under white, AR(1) and power-law noise, residuals, autocorrelation, spectrum, gaps; stores nothing', params: byId,
    query: fitQuery, answer: fitAnswer,
  }),
  regionSeaLevel: contract({
    id: 'regionSeaLevel', method: 'GET', path: '/api/v1/regions/{id}/sea-level', action: 'region.read', summary: 'Where the sea rises and falls for 100 Gt lost by a region', params: byId,
    query: seaLevelQuery, answer: seaLevelAnswer,
  }),
  regionSeaLevelCsv: contract({
    id: 'regionSeaLevelCsv', method: 'GET', path: '/api/v1/regions/{id}/sea-level.csv', action: 'region.read', summary: 'The same as a grid in CSV', params: byId,
    query: seaLevelQuery, answer: bytes, answerType: 'text/csv',
  }),
}
