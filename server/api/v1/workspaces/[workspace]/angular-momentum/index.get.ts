import { contracts } from '#shared/api/contracts'
import { listFluids } from '../../../../../services/angularMomentum'
import { route } from '../../../../../utils/route'

export default route(contracts.fluidList, ({ context, principal, params }) => listFluids(context, principal, params.workspace))
