import { contracts } from '#shared/api/contracts'
import { revokeToken } from '../../../services/tokens'
import { route } from '../../../utils/route'

export default route(contracts.tokenRevoke, ({ context, principal, params }) => revokeToken(context, principal, params.id))
