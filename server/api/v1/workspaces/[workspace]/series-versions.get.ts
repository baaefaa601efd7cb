import { contracts } from '#shared/api/contracts'
import { listVersions } from '../../../../services/seriesStore'
import { route } from '../../../../utils/route'

export default route(contracts.seriesVersionList, ({ context, params }) => listVersions(context, params.workspace))
