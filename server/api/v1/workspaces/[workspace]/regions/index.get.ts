import { contracts } from '#shared/api/contracts'
import { listRegions } from '../../../../../services/regions'
import { route } from '../../../../../utils/route'

export default route(contracts.regionList, ({ context, principal, params, query }) => listRegions(context, principal, params.workspace, query))
