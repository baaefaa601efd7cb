import { contracts } from '#shared/api/contracts'
import { readComparison } from '../../../../services/comparisons'
import { route } from '../../../../utils/route'

export default route(contracts.runComparison, ({ context, principal, params, query }) => readComparison(context, principal, params.id, query))
