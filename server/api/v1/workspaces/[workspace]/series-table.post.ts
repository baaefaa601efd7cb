import { contracts } from '#shared/api/contracts'
import { createSeriesTable } from '../../../../services/massSeries'
import { route } from '../../../../utils/route'

export default route(contracts.seriesTableCreate, ({ context, principal, params, upload, body }) => createSeriesTable(context, principal, params.workspace, upload, body))
