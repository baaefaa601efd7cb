import { contracts } from '#shared/api/contracts'
import { listScenarios } from '../../../../../services/scenarios'
import { route } from '../../../../../utils/route'

export default route(contracts.scenarioList, ({ context, principal, params, query }) => listScenarios(context, principal, params.workspace, query))
