import { contracts } from '#shared/api/contracts'
import { listTokens } from '../../../services/tokens'
import { route } from '../../../utils/route'

export default route(contracts.tokenList, ({ context, principal }) => listTokens(context, principal!.userId))
