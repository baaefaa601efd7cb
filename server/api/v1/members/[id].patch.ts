import { contracts } from '#shared/api/contracts'
import { changeMember } from '../../../services/people'
import { route } from '../../../utils/route'

export default route(contracts.memberChange, ({ context, principal, params, body }) => changeMember(context, principal, params.id, body))
