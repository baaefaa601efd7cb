import { contracts } from '#shared/api/contracts'
import { listGrids } from '../../../../../services/grids'
import { route } from '../../../../../utils/route'

export default route(contracts.gridList, ({ context, principal, params }) => listGrids(context, principal, params.workspace))
