import { contracts } from '#shared/api/contracts'
import { listAgencies } from '../../../../../services/people'
import { route } from '../../../../../utils/route'

export default route(contracts.agencyList, ({ context, params }) => listAgencies(context, params.workspace))
