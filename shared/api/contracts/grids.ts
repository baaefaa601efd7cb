import { z } from 'zod'
import { gridLimits } from '../../grids/limits.ts'
import { contract } from '../contract.ts'
import { gridAcceptance, gridDetail, gridMonth, gridOptions, gridSeriesPreview, gridSeriesRequest, gridSummary } from '../gridSchemas.ts'
import { jobView, listOf, revision, ulid, versionSummary } from '../schemas.ts'
import { inWorkspace, byId, changed } from './common.ts'

/** Grids of water-equivalent height and series from them. */
export const gridContracts = {
  gridList: contract({ id: 'gridList', method: 'GET', path: '/api/v1/workspaces/{workspace}/grids', action: 'region.read', summary: 'Grids of water-equivalent height, newest first', params: inWorkspace, answer: listOf(gridSummary) }),
  gridCreate: contract({
    id: 'gridCreate', method: 'POST', path: '/api/v1/workspaces/{workspace}/grids', action: 'region.write', summary: 'Read a grid from NetCDF or CSV; answers with a job', params: inWorkspace, bodyType: 'multipart',
    body: gridOptions, answer: jobView, status: 202, maxBytes: gridLimits.bytes,
  }),
  gridRead: contract({ id: 'gridRead', method: 'GET', path: '/api/v1/grids/{id}', action: 'region.read', summary: 'What a grid holds', params: byId, answer: gridDetail }),
  gridRemove: contract({
    id: 'gridRemove', method: 'DELETE', path: '/api/v1/grids/{id}', action: 'region.write', summary: 'Put a grid in the bin; series that were taken from it stay', params: byId,
    query: z.object({ revision: z.coerce.number().int() }), answer: changed,
  }),
  gridRestore: contract({
    id: 'gridRestore', method: 'POST', path: '/api/v1/grids/{id}/restore', action: 'region.write', summary: 'Take a grid out of the bin', params: byId, body: z.object({ revision }), answer: changed,
  }),
  gridMonth: contract({
    id: 'gridMonth', method: 'GET', path: '/api/v1/grids/{id}/months/{n}', action: 'region.read', summary: 'One month of a grid for a map, about chosen regions or whole; cells are merged where there are too many', params: z.object({ id: ulid, n: z.coerce.number().int().min(0) }),
    query: z.object({ variable: z.string().max(200).optional(), regions: z.string().max(8000).optional() }), answer: gridMonth,
  }),
  gridSeries: contract({
    id: 'gridSeries', method: 'POST', path: '/api/v1/grids/{id}/series', action: 'region.write', summary: 'Take series of regions from a grid; answers with a job, stores no version', params: byId,
    body: gridSeriesRequest, answer: jobView, status: 202,
  }),
  gridSeriesRead: contract({ id: 'gridSeriesRead', method: 'GET', path: '/api/v1/jobs/{id}/series', action: 'region.read', summary: 'The series that a job took from a grid', params: byId, answer: gridSeriesPreview }),
  gridSeriesAccept: contract({
    id: 'gridSeriesAccept', method: 'POST', path: '/api/v1/jobs/{id}/series', action: 'region.write', summary: 'Store the series that a job took from a grid, a version for each region: all of them or none', params: byId,
    body: gridAcceptance, answer: listOf(versionSummary.extend({ regionId: ulid })), status: 201,
  }),
}
