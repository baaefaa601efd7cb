import { setResponseHeaders } from 'h3'
import { contracts } from '#shared/api/contracts'
import { seaLevelCsv, seaLevelOfRun } from '../../../../services/seaLevel'
import { attachment, route } from '../../../../utils/route'

export default route(contracts.runSeaLevelCsv, async ({ event, context, principal, params, query }) => {
  const view = await seaLevelOfRun(context, principal, params.id, { feedback: query.feedback, stepDeg: query.step, at: query.at })
  setResponseHeaders(event, { 'content-type': 'text/csv; charset=utf-8', 'content-disposition': attachment('sea-level.csv') })
  return seaLevelCsv(view)
})
