import { contracts } from '#shared/api/contracts'
import { listMembers } from '../../../../../services/people'
import { route } from '../../../../../utils/route'

export default route(contracts.memberList, ({ context, params }) => listMembers(context, params.workspace))
