import { z } from 'zod'
import { attributionAnswer, attributionQuery } from '../attributionSchemas.ts'
import { contract } from '../contract.ts'
import { monteCarloRequest, monteCarloView } from '../gridSchemas.ts'
import { comparison, runView } from '../runSchemas.ts'
import { draftOverlap, jobView, listOf, name, page, revision, runSummary, scenario, scenarioDraft, ulid } from '../schemas.ts'
import { seaLevelQuery, seaLevelAnswer } from '../seaLevelSchemas.ts'
import { inWorkspace, byId, changed, bytes, comparedBy } from './common.ts'

/** Scenarios, runs and their jobs. */
export const runContracts = {
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
}
