import { contracts } from '#shared/api/contracts'
import { readMonteCarlo } from '../../../../services/monteCarlo'
import { route } from '../../../../utils/route'

export default route(contracts.runMonteCarloRead, ({ context, principal, params }) => readMonteCarlo(context, principal, params.id))
