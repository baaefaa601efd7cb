import { contracts } from '#shared/api/contracts'
import { listEditions } from '../../../../services/editions'
import { route } from '../../../../utils/route'

export default route(contracts.editionList, ({ context, params, query }) => listEditions(context, params.workspace, query))
