import { contracts } from '#shared/api/contracts'
import { readObserved } from '../../../services/observed'
import { route } from '../../../utils/route'

export default route(contracts.observedRead, ({ context, principal, params }) => readObserved(context, principal, params.id))
