import { contracts } from '#shared/api/contracts'
import { readChainOfObserved } from '../../../../services/observedChain'
import { route } from '../../../../utils/route'

export default route(contracts.observedChain, ({ context, principal, params, query }) => readChainOfObserved(context, principal, params.id, query))
