import { z } from 'zod'
import { gridLimits } from '../grids/limits.ts'
import { epochFormats } from '../series/epochColumn.ts'
import { tokenScopes } from '../permissions.ts'
import { oceanModes } from '../types/domain.ts'
import { attributionAnswer, attributionQuery } from './attributionSchemas.ts'
import { chainAnswer, chainBody, chainQuery, chainText, savedChain } from './chainSchemas.ts'
import { contract, type Contract } from './contract.ts'
import { evaluateAnswer, evaluateRequest } from './evaluateSchemas.ts'
import { fitAnswer, fitQuery } from './fitSchemas.ts'
import { fluidOptions, fluidSummary } from './fluidSchemas.ts'
import { gravityFields } from './gravitySchemas.ts'
import { evenSpread, gridAcceptance, gridDetail, gridMonth, gridOptions, gridSeriesPreview, gridSeriesRequest, gridSummary, monteCarloRequest, monteCarloView } from './gridSchemas.ts'
import { reduceOptions, reducedSeries } from './reduceSchemas.ts'
import { comparison, editionView, runView } from './runSchemas.ts'
import {
  agency, draftOverlap, edition, geometry, jobView, limits, listOf, markDecisions, massColumns, massConversion, me, name, observedData, observedSummary, page, perGt, prose,
  region, regionKind, regionMonths, regionTotal, revision, role, runSummary, scenario, scenarioDraft, seriesFacts, sha256, trendSummary, ulid, versionSummary,
} from './schemas.ts'

const inWorkspace = z.object({ workspace: ulid })
const byId = z.object({ id: ulid })
const changed = z.object({ revision })
const nothing = z.void()
const editionPath = z.object({ slug: z.string().max(80), n: z.coerce.number().int().min(1) })
const bytes = z.unknown()

const seaLevelQuery = z.object({
  /** Rotational feedback, on by default for maps of the sea. */
  feedback: z.enum(['true', 'false']).default('true').transform(text => text === 'true'),
  step: z.enum(['1', '2', '3', '5']).default('2').transform(Number),
  /** Places as latitude,longitude;latitude,longitude. */
  at: z.string().max(2000).optional(),
})
const seaLevelAnswer = z.object({
  unit: z.enum(['mm per year', 'mm per 100 Gt lost']), feedback: z.boolean(), degree: z.int(), barystaticMm: z.number(), stepDeg: z.number(),
  latitudesDeg: z.array(z.number()), longitudesDeg: z.array(z.number()), seaLevelMm: z.array(z.number()), sea: z.array(z.number()),
  places: z.array(z.object({ latitudeDeg: z.number(), longitudeDeg: z.number(), seaLevelMm: z.number(), relative: z.number().nullable() })),
})

const password = z.string().min(10, 'must have at least 10 characters').max(200)
const versionFacts = z.object({
  name, reason: prose.default(''), source: prose, licence: prose.default(''), independence: prose.default(''),
})
const oneTimeLink = z.object({ link: z.string(), expiresAt: z.string() })
/** `mailed`: the link is on its way by mail as well. */
const invited = oneTimeLink.extend({ mailed: z.boolean() })
const token = z.object({ id: ulid, name: z.string(), scope: z.enum(tokenScopes), createdAt: z.string(), expiresAt: z.string(), lastUsedAt: z.string().nullable() })
const columnIndex = z.int().min(0)
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
/** How an observed series is treated before a run is held against it: its tides alone, or a whole chain, which then says all. */
const comparedBy = z.object({ zonalTides: z.enum(['none', 'all']).default('none'), chain: chainText.optional() })

/** Every route of the product, in one list. */
export const contracts = {
  // Sessions and people
  sessionRead: contract({ id: 'sessionRead', method: 'GET', path: '/api/v1/session', action: 'public.read', summary: 'Who is signed in', answer: me }),
  sessionCreate: contract({
    id: 'sessionCreate', method: 'POST', path: '/api/v1/session', action: 'public.read', summary: 'Sign in',
    body: z.object({ email: z.string().min(1).max(254), password: z.string().min(1).max(200) }), answer: me,
  }),
  sessionDelete: contract({ id: 'sessionDelete', method: 'DELETE', path: '/api/v1/session', action: 'public.read', summary: 'Sign out', answer: nothing, status: 204 }),
  invitationRead: contract({
    id: 'invitationRead', method: 'GET', path: '/api/v1/invitations/{token}', action: 'public.read', summary: 'What a one-time link is for',
    params: z.object({ token: z.string().max(100) }),
    answer: z.object({ kind: z.enum(['operator', 'member', 'password']), email: z.string().nullable(), workspaceName: z.string().nullable(), role: role.nullable(), knownAccount: z.boolean() }),
  }),
  invitationAccept: contract({
    id: 'invitationAccept', method: 'POST', path: '/api/v1/invitations/{token}', action: 'public.read', summary: 'Use a one-time link',
    params: z.object({ token: z.string().max(100) }),
    body: z.object({ email: z.email().max(254).optional(), name: name.optional(), password: password.optional(), workspaceName: name.optional(), agencyName: name.optional() }),
    answer: me,
  }),
  passwordForgotten: contract({
    id: 'passwordForgotten', method: 'POST', path: '/api/v1/password-resets', action: 'public.read',
    summary: 'Ask for a one-time link to a new password by mail; the answer is the same whether or not there is such an account',
    body: z.object({ email: z.email().max(254) }), answer: z.object({ mail: z.boolean() }),
  }),
  passwordChange: contract({
    id: 'passwordChange', method: 'POST', path: '/api/v1/account/password', action: 'account.manage', summary: 'Change one’s own password; ends all other sessions',
    body: z.object({ current: z.string().min(1).max(200), password }), answer: nothing, status: 204,
  }),
  tokenList: contract({ id: 'tokenList', method: 'GET', path: '/api/v1/tokens', action: 'account.manage', summary: 'One’s own tokens', answer: listOf(token) }),
  tokenCreate: contract({
    id: 'tokenCreate', method: 'POST', path: '/api/v1/tokens', action: 'account.manage', summary: 'Make a token for a program; its secret is in this answer and nowhere else',
    body: z.object({ name, scope: z.enum(tokenScopes), days: z.int().min(1).max(366) }), answer: token.extend({ secret: z.string() }), status: 201, secret: true,
  }),
  tokenRevoke: contract({
    id: 'tokenRevoke', method: 'DELETE', path: '/api/v1/tokens/{id}', action: 'account.manage', summary: 'Revoke one of one’s own tokens', params: byId, answer: nothing, status: 204,
  }),
  invitationList: contract({
    id: 'invitationList', method: 'GET', path: '/api/v1/workspaces/{workspace}/invitations', action: 'member.manage', summary: 'Invitations that nobody used yet', params: inWorkspace,
    answer: listOf(z.object({ id: sha256, email: z.string(), role, agencyName: z.string().nullable(), createdAt: z.string(), createdBy: z.string().nullable(), expiresAt: z.string() })),
  }),
  invitationWithdraw: contract({
    id: 'invitationWithdraw', method: 'DELETE', path: '/api/v1/workspaces/{workspace}/invitations/{id}', action: 'member.manage', summary: 'Withdraw an invitation: its link no longer works',
    params: z.object({ workspace: ulid, id: sha256 }), answer: nothing, status: 204,
  }),
  memberList: contract({
    id: 'memberList', method: 'GET', path: '/api/v1/workspaces/{workspace}/members', action: 'member.manage', summary: 'People of a workspace', params: inWorkspace,
    answer: listOf(z.object({ id: ulid, revision, userId: ulid, name: z.string(), email: z.string(), role, agencyId: ulid.nullable(), agencyName: z.string().nullable() })),
  }),
  memberInvite: contract({
    id: 'memberInvite', method: 'POST', path: '/api/v1/workspaces/{workspace}/members', action: 'member.manage', summary: 'Ask somebody in by a one-time link', params: inWorkspace,
    body: z.object({ email: z.email().max(254), role, agencyId: ulid.nullable() }), answer: invited, status: 201, secret: true,
  }),
  memberChange: contract({
    id: 'memberChange', method: 'PATCH', path: '/api/v1/members/{id}', action: 'member.manage', summary: 'Change a role', params: byId,
    body: z.object({ revision, role, agencyId: ulid.nullable() }), answer: changed,
  }),
  memberPasswordLink: contract({
    id: 'memberPasswordLink', method: 'POST', path: '/api/v1/members/{id}/password-link', action: 'member.manage',
    summary: 'Make a one-time link to a new password for a member who belongs to no other workspace', params: byId, answer: oneTimeLink, status: 201, secret: true,
  }),
  memberRemove: contract({
    id: 'memberRemove', method: 'DELETE', path: '/api/v1/members/{id}', action: 'member.manage', summary: 'Remove somebody from a workspace', params: byId,
    query: z.object({ revision: z.coerce.number().int() }), answer: nothing, status: 204,
  }),
  agencyList: contract({
    id: 'agencyList', method: 'GET', path: '/api/v1/workspaces/{workspace}/agencies', action: 'workspace.read', summary: 'Agencies of a workspace', params: inWorkspace, answer: listOf(agency),
  }),
  agencyCreate: contract({
    id: 'agencyCreate', method: 'POST', path: '/api/v1/workspaces/{workspace}/agencies', action: 'member.manage', summary: 'Add an agency', params: inWorkspace,
    body: z.object({ name }), answer: agency, status: 201,
  }),
  logList: contract({
    id: 'logList', method: 'GET', path: '/api/v1/workspaces/{workspace}/log', action: 'log.read', summary: 'Change log, newest first, with its hash chain', params: inWorkspace, query: page,
    answer: listOf(z.object({
      seq: z.int(), at: z.string(), actor: z.string(), action: z.string(), entity: z.string(), entityId: z.string(),
      before: z.unknown(), after: z.unknown(), hash: sha256,
    })).extend({ chainIntact: z.boolean() }),
  }),

  // The engine, stateless
  evaluate: contract({
    id: 'evaluate', method: 'POST', path: '/api/v1/evaluate', action: 'evaluate', summary: 'Effect of mass changes on the day and the pole; stores nothing',
    body: evaluateRequest, answer: evaluateAnswer, maxBytes: limits.evaluateBytes,
  }),

  observedReduce: contract({
    id: 'observedReduce', method: 'POST', path: '/api/v1/observed/reduce', action: 'evaluate', summary: 'Take the known parts out of an observed series; stores nothing', bodyType: 'multipart',
    body: reduceOptions, answer: reducedSeries, maxBytes: limits.originalBytes,
  }),

  // Regions
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

  // Mass series
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

  // Grids of water-equivalent height
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

  // Observed Earth orientation
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

  // Scenarios, runs, jobs
  scenarioList: contract({ id: 'scenarioList', method: 'GET', path: '/api/v1/workspaces/{workspace}/scenarios', action: 'scenario.read', summary: 'Scenarios', params: inWorkspace, query: page, answer: listOf(scenario) }),
  scenarioCreate: contract({
    id: 'scenarioCreate', method: 'POST', path: '/api/v1/workspaces/{workspace}/scenarios', action: 'scenario.write', summary: 'Add a scenario', params: inWorkspace,
    body: z.object({ name, draft: scenarioDraft }), answer: scenario, status: 201,
  }),
  scenarioRead: contract({
    id: 'scenarioRead', method: 'GET', path: '/api/v1/scenarios/{id}', action: 'scenario.read', summary: 'A scenario, its runs, and the overlaps among its regions with what was decided of each', params: byId,
    answer: scenario.extend({ runs: z.array(runSummary), overlaps: z.array(draftOverlap) }),
  }),
  scenarioChange: contract({
    id: 'scenarioChange', method: 'PATCH', path: '/api/v1/scenarios/{id}', action: 'scenario.write', summary: 'Change a scenario’s draft', params: byId,
    body: z.object({ revision, name: name.optional(), draft: scenarioDraft.optional() }), answer: scenario,
  }),
  scenarioRemove: contract({
    id: 'scenarioRemove', method: 'DELETE', path: '/api/v1/scenarios/{id}', action: 'scenario.write', summary: 'Put a scenario in the bin', params: byId,
    query: z.object({ revision: z.coerce.number().int() }), answer: changed,
  }),
  scenarioRestore: contract({
    id: 'scenarioRestore', method: 'POST', path: '/api/v1/scenarios/{id}/restore', action: 'scenario.write', summary: 'Take a scenario out of the bin', params: byId,
    body: z.object({ revision }), answer: changed,
  }),
  runCreate: contract({
    id: 'runCreate', method: 'POST', path: '/api/v1/scenarios/{id}/runs', action: 'run.create', summary: 'Run a scenario as it stands; answers with a job. Refused with an issue for each overlap that is not settled', params: byId,
    body: z.object({ revision }), answer: jobView, status: 202,
  }),
  jobRead: contract({ id: 'jobRead', method: 'GET', path: '/api/v1/jobs/{id}', action: 'run.read', summary: 'State of a job', params: byId, answer: jobView }),
  jobEvents: contract({ id: 'jobEvents', method: 'GET', path: '/api/v1/jobs/{id}/events', action: 'run.read', summary: 'State of a job as server-sent events', params: byId, answer: bytes, answerType: 'text/event-stream' }),
  jobCancel: contract({ id: 'jobCancel', method: 'DELETE', path: '/api/v1/jobs/{id}', action: 'run.create', summary: 'Cancel a job', params: byId, answer: jobView }),
  runRead: contract({ id: 'runRead', method: 'GET', path: '/api/v1/runs/{id}', action: 'run.read', summary: 'A run and its result', params: byId, answer: runView }),
  runComparison: contract({
    id: 'runComparison', method: 'GET', path: '/api/v1/runs/{id}/comparison', action: 'run.read', summary: 'A run beside an observed series, as it is or reduced by a chain', params: byId,
    query: comparedBy.extend({ observed: ulid }), answer: comparison,
  }),
  runAttribution: contract({
    id: 'runAttribution', method: 'GET', path: '/api/v1/runs/{id}/attribution', action: 'run.read',
    summary: 'A run attributed to a reduced observed series: bands, trends under three noise models, budget with correlations, factors, what can be told apart; stores nothing', params: byId,
    query: attributionQuery, answer: attributionAnswer,
  }),
  runFile: contract({
    id: 'runFile', method: 'GET', path: '/api/v1/runs/{id}/files/{file}', action: 'report.export', summary: 'Report and data of a run: report.pdf, budget.csv, series.csv, regions.geojson, map.svg, map.png, run.json',
    params: z.object({ id: ulid, file: z.enum(['report.pdf', 'budget.csv', 'series.csv', 'regions.geojson', 'map.svg', 'map.png', 'run.json']) }),
    query: comparedBy.extend({ observed: ulid.optional() }), answer: bytes, answerType: 'application/octet-stream',
  }),

  runMonteCarlo: contract({
    id: 'runMonteCarlo', method: 'POST', path: '/api/v1/runs/{id}/monte-carlo', action: 'run.create', summary: 'Check the errors of a run by a seeded Monte Carlo; answers with a job', params: byId,
    body: monteCarloRequest, answer: jobView, status: 202,
  }),
  runMonteCarloRead: contract({
    id: 'runMonteCarloRead', method: 'GET', path: '/api/v1/runs/{id}/monte-carlo', action: 'run.read', summary: 'The latest Monte Carlo of a run: sampled beside linear errors', params: byId,
    answer: z.object({ latest: monteCarloView.nullable() }),
  }),

  runSeaLevel: contract({
    id: 'runSeaLevel', method: 'GET', path: '/api/v1/runs/{id}/sea-level', action: 'run.read', summary: 'Where the sea rises and falls for the trends of a run', params: byId,
    query: seaLevelQuery, answer: seaLevelAnswer,
  }),
  runSeaLevelCsv: contract({
    id: 'runSeaLevelCsv', method: 'GET', path: '/api/v1/runs/{id}/sea-level.csv', action: 'run.read', summary: 'The same as a grid in CSV', params: byId,
    query: seaLevelQuery, answer: bytes, answerType: 'text/csv',
  }),
  regionSeaLevel: contract({
    id: 'regionSeaLevel', method: 'GET', path: '/api/v1/regions/{id}/sea-level', action: 'region.read', summary: 'Where the sea rises and falls for 100 Gt lost by a region', params: byId,
    query: seaLevelQuery, answer: seaLevelAnswer,
  }),
  regionSeaLevelCsv: contract({
    id: 'regionSeaLevelCsv', method: 'GET', path: '/api/v1/regions/{id}/sea-level.csv', action: 'region.read', summary: 'The same as a grid in CSV', params: byId,
    query: seaLevelQuery, answer: bytes, answerType: 'text/csv',
  }),

  // Publication
  editionList: contract({ id: 'editionList', method: 'GET', path: '/api/v1/workspaces/{workspace}/editions', action: 'edition.list', summary: 'Published editions of a workspace', params: inWorkspace, query: page, answer: listOf(edition) }),
  editionCreate: contract({
    id: 'editionCreate', method: 'POST', path: '/api/v1/runs/{id}/editions', action: 'edition.publish', summary: 'Publish a run under a readable link; the same link again makes the next edition', params: byId,
    body: z.object({ slug: z.string().regex(/^[a-z0-9]+(-[a-z0-9]+)*$/, 'must be lower-case letters, digits and single hyphens').min(3).max(80), title: name, licence: prose, observedId: ulid.nullable() }).extend(comparedBy.shape),
    answer: edition, status: 201,
  }),
  editionWithdraw: contract({
    id: 'editionWithdraw', method: 'POST', path: '/api/v1/editions/{slug}/{n}/withdrawal', action: 'edition.publish', summary: 'Withdraw an edition; its page stays and says why', params: editionPath,
    body: z.object({ reason: prose.min(3) }), answer: edition,
  }),
  editionIndex: contract({ id: 'editionIndex', method: 'GET', path: '/api/v1/editions', action: 'public.read', summary: 'Newest editions that are published on this instance', answer: listOf(edition.extend({ sentence: z.string() })) }),
  editionRead: contract({
    id: 'editionRead', method: 'GET', path: '/api/v1/editions/{slug}', action: 'public.read', summary: 'A published edition; the newest unless n is given',
    params: z.object({ slug: z.string().max(80) }), query: z.object({ n: z.coerce.number().int().min(1).optional() }), answer: editionView,
  }),
  editionSeaLevel: contract({
    id: 'editionSeaLevel', method: 'GET', path: '/api/v1/editions/{slug}/{n}/sea-level', action: 'public.read', summary: 'Where the sea rises and falls for the trends of an edition, feedback on, every 2°',
    params: editionPath, answer: seaLevelAnswer,
  }),
  editionFile: contract({
    id: 'editionFile', method: 'GET', path: '/api/v1/editions/{slug}/{n}/{file}', action: 'public.read', summary: 'Downloads of an edition',
    params: editionPath.extend({ file: z.enum(['report.pdf', 'budget.csv', 'series.csv', 'regions.geojson', 'map.svg', 'map.png', 'run.json']) }),
    answer: bytes, answerType: 'application/octet-stream',
  }),

  // The instance
  validationRead: contract({
    id: 'validationRead', method: 'GET', path: '/api/v1/validation', action: 'public.read', summary: 'The engine beside published and independent references, computed by the engine that runs',
    answer: z.object({
      engineVersion: z.string(), earthModelChecksum: z.string(), passed: z.int(), failed: z.int(),
      checks: z.array(z.object({
        id: z.string(), group: z.string(), title: z.string(), unit: z.string(), computed: z.number(), reference: z.number(),
        ratio: z.number().nullable(), deviation: z.number(), within: z.boolean(),
        tolerance: z.looseObject({ kind: z.enum(['relative', 'scale', 'absolute', 'factor']), within: z.number() }),
        source: z.string(), origin: z.enum(['published', 'independent', 'arithmetic']), cause: z.string(),
      })),
    }),
  }),
  openapi: contract({ id: 'openapi', method: 'GET', path: '/api/v1/openapi.json', action: 'public.read', summary: 'This interface as OpenAPI 3.1', answer: z.looseObject({}) }),
  health: contract({
    id: 'health', method: 'GET', path: '/api/v1/health', action: 'public.read', summary: 'Whether the server is ready, and which ocean responses it computes',
    answer: z.object({ status: z.literal('ok'), version: z.string(), oceans: z.array(z.enum(oceanModes)), defaultOcean: z.enum(oceanModes) }),
  }),
}
export type ContractId = keyof typeof contracts
export const contractList: Contract[] = Object.values(contracts) as unknown as Contract[]
