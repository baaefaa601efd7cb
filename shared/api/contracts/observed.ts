import { z } from 'zod'
import { epochFormats } from '../../series/epochColumn.ts'
import { chainAnswer, chainBody, chainQuery, savedChain } from '../chainSchemas.ts'
import { contract } from '../contract.ts'
import { fluidOptions, fluidSummary } from '../fluidSchemas.ts'
import { gravityFields } from '../gravitySchemas.ts'
import { limits, listOf, name, observedData, observedSummary, page, prose, revision } from '../schemas.ts'
import { inWorkspace, byId, changed, versionFacts, columnIndex } from './common.ts'

const observedOptions = versionFacts.extend({
  /** For a table (CSV): which column is what. Left out, columns are recognised by name. */
  csv: z.object({
    epochColumn: columnIndex.optional(), epochFormat: z.enum(epochFormats).optional(),
    columns: z.object({
      xMas: columnIndex, yMas: columnIndex, lodMs: columnIndex, sigmaXMas: columnIndex, sigmaYMas: columnIndex, sigmaLodMs: columnIndex, chi1Mas: columnIndex, chi2Mas: columnIndex,
    }).partial().optional(),
    poleUnit: z.enum(['mas', 'arcsec']).optional(), lodUnit: z.enum(['ms', 's', 'us']).optional(),
  }).optional(),
  leaveOutBadRows: z.boolean().default(false),
})
const gravityOptions = z.object({
  name, source: prose, licence: prose.default(''), independence: prose.default(''), fields: gravityFields,
  /** Power of ten that the values are in, e.g. −10; left out: as the names of the columns say, else plain numbers. */
  exponent: z.int().min(-20).max(0).optional(),
  leaveOutBadRows: z.boolean().default(false),
})

/** Observed series and the chains that take the known parts out of them. */
export const observedContracts = {
  observedList: contract({ id: 'observedList', method: 'GET', path: '/api/v1/workspaces/{workspace}/observed', action: 'observed.read', summary: 'Observed series', params: inWorkspace, query: page, answer: listOf(observedSummary) }),
  observedCreate: contract({
    id: 'observedCreate', method: 'POST', path: '/api/v1/workspaces/{workspace}/observed', action: 'observed.write', summary: 'Store an observed Earth-orientation series', params: inWorkspace, bodyType: 'multipart',
    body: observedOptions, answer: observedSummary, status: 201, maxBytes: limits.originalBytes,
  }),
  observedRead: contract({ id: 'observedRead', method: 'GET', path: '/api/v1/observed/{id}', action: 'observed.read', summary: 'An observed series with its values', params: byId, answer: observedData }),
  observedRemove: contract({
    id: 'observedRemove', method: 'DELETE', path: '/api/v1/observed/{id}', action: 'observed.write', summary: 'Put an observed series in the bin', params: byId,
    query: z.object({ revision: z.coerce.number().int() }), answer: changed,
  }),
  observedRestore: contract({
    id: 'observedRestore', method: 'POST', path: '/api/v1/observed/{id}/restore', action: 'observed.write', summary: 'Take an observed series out of the bin', params: byId,
    body: z.object({ revision }), answer: changed,
  }),

  fluidList: contract({
    id: 'fluidList', method: 'GET', path: '/api/v1/workspaces/{workspace}/angular-momentum', action: 'observed.read', summary: 'Series of angular momentum of air and sea that a chain may subtract', params: inWorkspace, answer: listOf(fluidSummary),
  }),
  fluidCreate: contract({
    id: 'fluidCreate', method: 'POST', path: '/api/v1/workspaces/{workspace}/angular-momentum', action: 'observed.write', summary: 'Store a series of angular momentum with the answers to what its numbers do not say', params: inWorkspace, bodyType: 'multipart',
    body: fluidOptions, answer: fluidSummary, status: 201, maxBytes: limits.originalBytes,
  }),
  gravityCreate: contract({
    id: 'gravityCreate', method: 'POST', path: '/api/v1/workspaces/{workspace}/gravity', action: 'observed.write', summary: 'Store gravity coefficients of degree two as an observed series, with the answers to what their numbers do not say', params: inWorkspace, bodyType: 'multipart',
    body: gravityOptions, answer: observedSummary, status: 201, maxBytes: limits.originalBytes,
  }),
  observedChain: contract({
    id: 'observedChain', method: 'GET', path: '/api/v1/observed/{id}/chain', action: 'observed.read', summary: 'An observed series reduced step by step by a chain: before, removed and after of each step; stores nothing', params: byId,
    query: chainQuery, answer: chainAnswer,
  }),

  chainList: contract({ id: 'chainList', method: 'GET', path: '/api/v1/workspaces/{workspace}/chains', action: 'observed.read', summary: 'Reductions kept under a name', params: inWorkspace, answer: listOf(savedChain) }),
  chainCreate: contract({
    id: 'chainCreate', method: 'POST', path: '/api/v1/workspaces/{workspace}/chains', action: 'observed.write', summary: 'Keep a reduction under a name', params: inWorkspace, body: chainBody, answer: savedChain, status: 201,
  }),
  chainChange: contract({
    id: 'chainChange', method: 'PATCH', path: '/api/v1/chains/{id}', action: 'observed.write', summary: 'Rename a kept reduction or put another chain in its place', params: byId,
    body: chainBody.partial().extend({ revision }), answer: savedChain,
  }),
  chainRemove: contract({
    id: 'chainRemove', method: 'DELETE', path: '/api/v1/chains/{id}', action: 'observed.write', summary: 'Put a kept reduction in the bin', params: byId,
    query: z.object({ revision: z.coerce.number().int() }), answer: changed,
  }),
  chainRestore: contract({
    id: 'chainRestore', method: 'POST', path: '/api/v1/chains/{id}/restore', action: 'observed.write', summary: 'Take a kept reduction out of the bin', params: byId, body: z.object({ revision }), answer: changed,
  }),
}
