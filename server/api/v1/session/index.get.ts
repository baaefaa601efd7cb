import { contracts } from '#shared/api/contracts'
import { meView } from '../../../services/sessions'
import { route } from '../../../utils/route'

export default route(contracts.sessionRead, ({ context, principal }) => meView(context, principal))
