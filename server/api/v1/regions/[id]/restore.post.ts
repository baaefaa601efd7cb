import { contracts } from '#shared/api/contracts'
import { binRegion } from '../../../../services/regions'
import { route } from '../../../../utils/route'

export default route(contracts.regionRestore, ({ context, principal, params, body }) => binRegion(context, principal, params.id, body.revision, true))
