import { contracts } from '#shared/api/contracts'
import { createRegions } from '../../../../../services/regionBatch'
import { route } from '../../../../../utils/route'

export default route(contracts.regionCreateMany, ({ context, principal, params, body }) => createRegions(context, principal, params.workspace, body))
