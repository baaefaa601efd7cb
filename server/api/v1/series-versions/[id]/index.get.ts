import { contracts } from '#shared/api/contracts'
import { readSeriesVersion } from '../../../../services/massSeries'
import { route } from '../../../../utils/route'

export default route(contracts.seriesVersionRead, ({ context, principal, params }) => readSeriesVersion(context, principal, params.id))
