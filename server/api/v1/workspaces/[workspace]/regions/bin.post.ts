import { contracts } from '#shared/api/contracts'
import { binRegions } from '../../../../../services/regionBatch'
import { route } from '../../../../../utils/route'

export default route(contracts.regionRemoveMany, ({ context, principal, params, body }) => binRegions(context, principal, params.workspace, body))
