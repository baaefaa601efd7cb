import { contracts } from '#shared/api/contracts'
import { binChain } from '../../../../services/chains'
import { route } from '../../../../utils/route'

export default route(contracts.chainRestore, ({ context, principal, params, body }) => binChain(context, principal, params.id, body.revision, true))
