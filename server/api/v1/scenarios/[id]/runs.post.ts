import { contracts } from '#shared/api/contracts'
import { startRun } from '../../../../services/runs'
import { route } from '../../../../utils/route'

export default route(contracts.runCreate, ({ context, principal, params, body }) => startRun(context, principal, params.id, body.revision))
