import { contracts } from '#shared/api/contracts'
import { changeChain } from '../../../services/chains'
import { route } from '../../../utils/route'

export default route(contracts.chainChange, ({ context, principal, params, body }) => changeChain(context, principal, params.id, body))
