import { contracts } from '#shared/api/contracts'
import { binRegion } from '../../../../services/regions'
import { route } from '../../../../utils/route'

export default route(contracts.regionRemove, ({ context, principal, params, query }) => binRegion(context, principal, params.id, query.revision, false))
