import { contracts } from '#shared/api/contracts'
import { listChains } from '../../../../../services/chains'
import { route } from '../../../../../utils/route'

export default route(contracts.chainList, ({ context, principal, params }) => listChains(context, principal, params.workspace))
