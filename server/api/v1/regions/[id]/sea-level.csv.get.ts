import { setResponseHeaders } from 'h3'
import { contracts } from '#shared/api/contracts'
import { seaLevelCsv, seaLevelOfRegion } from '../../../../services/seaLevel'
import { attachment, route } from '../../../../utils/route'

export default route(contracts.regionSeaLevelCsv, async ({ event, context, principal, params, query }) => {
  const view = await seaLevelOfRegion(context, principal, params.id, { feedback: query.feedback, stepDeg: query.step, at: query.at })
  setResponseHeaders(event, { 'content-type': 'text/csv; charset=utf-8', 'content-disposition': attachment('sea-level.csv') })
  return seaLevelCsv(view)
})
