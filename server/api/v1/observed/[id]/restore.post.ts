import { contracts } from '#shared/api/contracts'
import { binObserved } from '../../../../services/observed'
import { route } from '../../../../utils/route'

export default route(contracts.observedRestore, ({ context, principal, params, body }) => binObserved(context, principal, params.id, body.revision, true))
