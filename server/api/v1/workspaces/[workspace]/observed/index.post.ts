import { contracts } from '#shared/api/contracts'
import { createObserved } from '../../../../../services/observed'
import { route } from '../../../../../utils/route'

export default route(contracts.observedCreate, ({ context, principal, params, upload, body }) => createObserved(context, principal, params.workspace, upload, body))
