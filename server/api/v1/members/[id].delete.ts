import { contracts } from '#shared/api/contracts'
import { removeMember } from '../../../services/people'
import { route } from '../../../utils/route'

export default route(contracts.memberRemove, ({ context, principal, params, query }) => removeMember(context, principal, params.id, query.revision))
