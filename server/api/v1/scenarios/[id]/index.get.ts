import { contracts } from '#shared/api/contracts'
import { readScenario } from '../../../../services/scenarios'
import { route } from '../../../../utils/route'

export default route(contracts.scenarioRead, ({ context, principal, params }) => readScenario(context, principal, params.id))
