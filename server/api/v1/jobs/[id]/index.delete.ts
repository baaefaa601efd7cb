import { contracts } from '#shared/api/contracts'
import { route } from '../../../../utils/route'

export default route(contracts.jobCancel, ({ context, principal, params }) => context.jobs.cancel(principal, params.id))
