import { contracts } from '#shared/api/contracts'
import { readRegion } from '../../../../services/regions'
import { route } from '../../../../utils/route'

export default route(contracts.regionRead, ({ context, principal, params }) => readRegion(context, principal, params.id))
