import { z } from 'zod'
import { contract } from '../contract.ts'
import { editionView } from '../runSchemas.ts'
import { edition, listOf, name, page, prose, ulid } from '../schemas.ts'
import { seaLevelAnswer } from '../seaLevelSchemas.ts'
import { inWorkspace, byId, bytes, comparedBy } from './common.ts'

const editionPath = z.object({ slug: z.string().max(80), n: z.coerce.number().int().min(1) })

/** Editions, which the public reads. */
export const publicationContracts = {
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
}
