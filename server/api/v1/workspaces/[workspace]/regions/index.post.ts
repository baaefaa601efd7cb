import { contracts } from '#shared/api/contracts'
import { createRegion } from '../../../../../services/regions'
import { route } from '../../../../../utils/route'

export default route(contracts.regionCreate, ({ context, principal, params, body }) => createRegion(context, principal, params.workspace, body))
