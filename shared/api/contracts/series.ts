import { z } from 'zod'
import { contract } from '../contract.ts'
import { limits, listOf, markDecisions, massColumns, massConversion, name, seriesFacts, ulid, versionSummary } from '../schemas.ts'
import { inWorkspace, byId, bytes, versionFacts, columnIndex } from './common.ts'

/** Mass series and their originals. */
export const seriesContracts = {
  seriesCreate: contract({
    id: 'seriesCreate', method: 'POST', path: '/api/v1/regions/{id}/series', action: 'region.write', summary: 'Store a new version of a region’s mass series', params: byId, bodyType: 'multipart',
    body: versionFacts.extend({
      facts: seriesFacts.nullable().default(null),
      columns: massColumns, conversion: massConversion.nullable().default(null), decisions: markDecisions.default([]), leaveOutBadRows: z.boolean().default(false),
      sharedRates: z.array(z.object({ source: name, sigmaGtPerYear: z.number().min(0) })).max(20).default([]),
    }),
    answer: versionSummary, status: 201, maxBytes: limits.originalBytes,
  }),
  seriesTableCreate: contract({
    id: 'seriesTableCreate', method: 'POST', path: '/api/v1/workspaces/{workspace}/series-table', action: 'region.write',
    summary: 'Store a new version of the mass series of several regions from one table with a column for each; all of them or none', params: inWorkspace, bodyType: 'multipart',
    body: versionFacts.omit({ name: true }).extend({
      facts: seriesFacts.nullable().default(null),
      columns: massColumns, conversion: massConversion.nullable().default(null), leaveOutBadRows: z.boolean().default(false),
      sharedRates: z.array(z.object({ source: name, sigmaGtPerYear: z.number().min(0) })).max(20).default([]),
      series: z.array(z.object({ regionId: ulid, valueColumn: columnIndex, sigmaColumn: columnIndex.nullable().default(null), unit: massColumns.shape.unit })).min(1).max(200),
    }),
    answer: listOf(versionSummary.extend({ regionId: ulid })), status: 201, maxBytes: limits.originalBytes,
  }),
  seriesVersionRead: contract({
    id: 'seriesVersionRead', method: 'GET', path: '/api/v1/series-versions/{id}', action: 'region.read', summary: 'Values of a series version', params: byId,
    answer: versionSummary.extend({
      regionId: ulid, mjd: z.array(z.number()), massGt: z.array(z.number()), sigmaGt: z.array(z.number()).nullable(),
      sharedRates: z.array(z.object({ source: z.string(), sigmaGtPerYear: z.number() })), recipe: z.looseObject({}),
    }),
  }),
  seriesVersionList: contract({
    id: 'seriesVersionList', method: 'GET', path: '/api/v1/workspaces/{workspace}/series-versions', action: 'region.read',
    summary: 'Every stored version of every mass series, newest first, to choose from', params: inWorkspace, answer: listOf(versionSummary.extend({ regionId: ulid })),
  }),
  originalRead: contract({
    id: 'originalRead', method: 'GET', path: '/api/v1/series-versions/{id}/original', action: 'region.read', summary: 'The original file as it was sent', params: byId, answer: bytes, answerType: 'application/octet-stream',
  }),
}
