import { contracts } from '#shared/api/contracts'
import { binScenario } from '../../../../services/scenarios'
import { route } from '../../../../utils/route'

export default route(contracts.scenarioRestore, ({ context, principal, params, body }) => binScenario(context, principal, params.id, body.revision, true))
