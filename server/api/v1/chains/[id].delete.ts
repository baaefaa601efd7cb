import { contracts } from '#shared/api/contracts'
import { binChain } from '../../../services/chains'
import { route } from '../../../utils/route'

export default route(contracts.chainRemove, ({ context, principal, params, query }) => binChain(context, principal, params.id, query.revision))
