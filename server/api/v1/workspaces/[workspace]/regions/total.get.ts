import { contracts } from '#shared/api/contracts'
import { regionTotal } from '../../../../../services/regionTotal'
import { route } from '../../../../../utils/route'

export default route(contracts.regionTotal, ({ context, params }) => regionTotal(context, params.workspace))
