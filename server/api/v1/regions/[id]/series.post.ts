import { contracts } from '#shared/api/contracts'
import { createSeriesVersion } from '../../../../services/massSeries'
import { route } from '../../../../utils/route'

export default route(contracts.seriesCreate, ({ context, principal, params, upload, body }) => createSeriesVersion(context, principal, params.id, upload, body))
