import { contracts } from '#shared/api/contracts'
import { createToken } from '../../../services/tokens'
import { route } from '../../../utils/route'

export default route(contracts.tokenCreate, ({ context, principal, body }) => createToken(context, principal, body))
