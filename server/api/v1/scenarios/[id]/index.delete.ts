import { contracts } from '#shared/api/contracts'
import { binScenario } from '../../../../services/scenarios'
import { route } from '../../../../utils/route'

export default route(contracts.scenarioRemove, ({ context, principal, params, query }) => binScenario(context, principal, params.id, query.revision))
