import { contracts } from '#shared/api/contracts'
import { startMonteCarlo } from '../../../../services/monteCarlo'
import { route } from '../../../../utils/route'

export default route(contracts.runMonteCarlo, ({ context, principal, params, body }) => startMonteCarlo(context, principal, params.id, body))
