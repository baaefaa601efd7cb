import { contracts } from '#shared/api/contracts'
import { binObserved } from '../../../services/observed'
import { route } from '../../../utils/route'

export default route(contracts.observedRemove, ({ context, principal, params, query }) => binObserved(context, principal, params.id, query.revision))
