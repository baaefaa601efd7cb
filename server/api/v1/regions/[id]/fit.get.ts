import { contracts } from '#shared/api/contracts'
import { fitOfRegion } from '../../../../services/fits'
import { route } from '../../../../utils/route'

export default route(contracts.regionFit, ({ context, principal, params, query }) => fitOfRegion(context, principal, params.id, query))
