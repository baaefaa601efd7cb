import { contracts } from '#shared/api/contracts'
import { changeScenario } from '../../../../services/scenarios'
import { route } from '../../../../utils/route'

export default route(contracts.scenarioChange, ({ context, principal, params, body }) => changeScenario(context, principal, params.id, body))
