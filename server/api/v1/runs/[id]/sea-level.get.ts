import { contracts } from '#shared/api/contracts'
import { seaLevelOfRun } from '../../../../services/seaLevel'
import { route } from '../../../../utils/route'

export default route(contracts.runSeaLevel, ({ context, principal, params, query }) =>
  seaLevelOfRun(context, principal, params.id, { feedback: query.feedback, stepDeg: query.step, at: query.at }))
