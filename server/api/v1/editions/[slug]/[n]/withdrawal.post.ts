import { contracts } from '#shared/api/contracts'
import { withdraw } from '../../../../../services/editions'
import { route } from '../../../../../utils/route'

export default route(contracts.editionWithdraw, ({ context, principal, params, body }) => withdraw(context, principal, params.slug, params.n, body.reason))
