import { contracts } from '#shared/api/contracts'
import { createChain } from '../../../../../services/chains'
import { route } from '../../../../../utils/route'

export default route(contracts.chainCreate, ({ context, principal, params, body }) => createChain(context, principal, params.workspace, body))
