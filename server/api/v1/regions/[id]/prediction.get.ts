import { contracts } from '#shared/api/contracts'
import { predictRegion } from '../../../../services/regions'
import { route } from '../../../../utils/route'

export default route(contracts.regionPrediction, ({ context, principal, params, query }) => predictRegion(context, principal, params.id, query.version, query.ocean))
