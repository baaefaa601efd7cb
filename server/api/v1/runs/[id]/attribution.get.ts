import { contracts } from '#shared/api/contracts'
import { attributionOfRun } from '../../../../services/attribution'
import { route } from '../../../../utils/route'

export default route(contracts.runAttribution, ({ context, principal, params, query }) => attributionOfRun(context, principal, params.id, query))
