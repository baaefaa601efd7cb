import { contracts } from '#shared/api/contracts'
import { changeRegion } from '../../../../services/regions'
import { route } from '../../../../utils/route'

export default route(contracts.regionChange, ({ context, principal, params, body }) => changeRegion(context, principal, params.id, body))
