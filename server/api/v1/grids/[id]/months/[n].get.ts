import { contracts } from '#shared/api/contracts'
import { readMonth } from '../../../../../services/grids'
import { route } from '../../../../../utils/route'

export default route(contracts.gridMonth, ({ context, principal, params, query }) => readMonth(context, principal, params.id, params.n, query))
