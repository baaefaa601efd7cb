import { contracts } from '#shared/api/contracts'
import { readRun } from '../../../../services/runView'
import { route } from '../../../../utils/route'

export default route(contracts.runRead, ({ context, principal, params }) => readRun(context, principal, params.id))
