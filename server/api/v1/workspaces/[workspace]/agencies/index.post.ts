import { contracts } from '#shared/api/contracts'
import { createAgency } from '../../../../../services/people'
import { route } from '../../../../../utils/route'

export default route(contracts.agencyCreate, ({ context, principal, params, body }) => createAgency(context, principal, params.workspace, body.name))
