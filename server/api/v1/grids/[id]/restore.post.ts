import { contracts } from '#shared/api/contracts'
import { binGrid } from '../../../../services/grids'
import { route } from '../../../../utils/route'

export default route(contracts.gridRestore, ({ context, principal, params, body }) => binGrid(context, principal, params.id, body.revision, true))
