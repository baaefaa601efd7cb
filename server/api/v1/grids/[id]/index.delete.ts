import { contracts } from '#shared/api/contracts'
import { binGrid } from '../../../../services/grids'
import { route } from '../../../../utils/route'

export default route(contracts.gridRemove, ({ context, principal, params, query }) => binGrid(context, principal, params.id, query.revision))
