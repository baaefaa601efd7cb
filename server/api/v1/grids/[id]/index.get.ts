import { contracts } from '#shared/api/contracts'
import { readGrid } from '../../../../services/grids'
import { route } from '../../../../utils/route'

export default route(contracts.gridRead, ({ context, principal, params }) => readGrid(context, principal, params.id))
