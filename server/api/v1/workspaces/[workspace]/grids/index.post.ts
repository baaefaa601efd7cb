import { contracts } from '#shared/api/contracts'
import { createGrid } from '../../../../../services/grids'
import { route } from '../../../../../utils/route'

export default route(contracts.gridCreate, ({ context, principal, params, upload, body }) => createGrid(context, principal, params.workspace, upload, body))
