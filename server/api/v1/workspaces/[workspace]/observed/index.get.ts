import { contracts } from '#shared/api/contracts'
import { listObserved } from '../../../../../services/observed'
import { route } from '../../../../../utils/route'

export default route(contracts.observedList, ({ context, principal, params, query }) => listObserved(context, principal, params.workspace, query))
