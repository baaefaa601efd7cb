import { contracts } from '#shared/api/contracts'
import { listErrorSources } from '../../../../services/massSeries'
import { route } from '../../../../utils/route'

export default route(contracts.errorSourceList, ({ context, params }) => listErrorSources(context, params.workspace))
