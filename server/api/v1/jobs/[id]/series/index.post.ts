import { contracts } from '#shared/api/contracts'
import { acceptGridSeries } from '../../../../../services/gridSeries'
import { route } from '../../../../../utils/route'

export default route(contracts.gridSeriesAccept, ({ context, principal, params, body }) => acceptGridSeries(context, principal, params.id, body))
