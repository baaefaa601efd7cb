import { contracts } from '#shared/api/contracts'
import { seaLevelOfRegion } from '../../../../services/seaLevel'
import { route } from '../../../../utils/route'

export default route(contracts.regionSeaLevel, ({ context, principal, params, query }) =>
  seaLevelOfRegion(context, principal, params.id, { feedback: query.feedback, stepDeg: query.step, at: query.at }))
