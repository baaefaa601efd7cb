import { contracts } from '#shared/api/contracts'
import { listLog } from '../../../../services/log'
import { route } from '../../../../utils/route'

export default route(contracts.logList, ({ context, params, query }) => listLog(context, params.workspace, query))
