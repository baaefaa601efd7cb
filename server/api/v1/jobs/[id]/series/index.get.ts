import { contracts } from '#shared/api/contracts'
import { readGridSeries } from '../../../../../services/gridSeries'
import { route } from '../../../../../utils/route'

export default route(contracts.gridSeriesRead, ({ context, principal, params }) => readGridSeries(context, principal, params.id))
