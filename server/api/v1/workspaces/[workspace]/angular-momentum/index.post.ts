import { contracts } from '#shared/api/contracts'
import { createFluid } from '../../../../../services/angularMomentum'
import { route } from '../../../../../utils/route'

export default route(contracts.fluidCreate, ({ context, principal, params, upload, body }) => createFluid(context, principal, params.workspace, upload, body))
