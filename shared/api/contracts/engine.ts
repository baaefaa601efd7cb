import { contract } from '../contract.ts'
import { evaluateAnswer, evaluateRequest } from '../evaluateSchemas.ts'
import { reduceOptions, reducedSeries } from '../reduceSchemas.ts'
import { limits } from '../schemas.ts'

/** The engine without a database. */
export const engineContracts = {
  evaluate: contract({
    id: 'evaluate', method: 'POST', path: '/api/v1/evaluate', action: 'evaluate', summary: 'Effect of mass changes on the day and the pole; stores nothing',
    body: evaluateRequest, answer: evaluateAnswer, maxBytes: limits.evaluateBytes,
  }),

  observedReduce: contract({
    id: 'observedReduce', method: 'POST', path: '/api/v1/observed/reduce', action: 'evaluate', summary: 'Take the known parts out of an observed series; stores nothing', bodyType: 'multipart',
    body: reduceOptions, answer: reducedSeries, maxBytes: limits.originalBytes,
  }),
}
