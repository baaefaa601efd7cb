import { contracts } from '#shared/api/contracts'
import { route } from '../../../../utils/route'

export default route(contracts.jobRead, ({ context, principal, params }) => context.jobs.view(principal, params.id))
