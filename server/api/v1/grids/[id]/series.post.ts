import { contracts } from '#shared/api/contracts'
import { startGridSeries } from '../../../../services/grids'
import { route } from '../../../../utils/route'

export default route(contracts.gridSeries, ({ context, principal, params, body }) => startGridSeries(context, principal, params.id, body))
