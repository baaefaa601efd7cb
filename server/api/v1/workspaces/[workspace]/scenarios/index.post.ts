import { contracts } from '#shared/api/contracts'
import { createScenario } from '../../../../../services/scenarios'
import { route } from '../../../../../utils/route'

export default route(contracts.scenarioCreate, ({ context, principal, params, body }) => createScenario(context, principal, params.workspace, body))
