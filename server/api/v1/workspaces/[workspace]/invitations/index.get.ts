import { contracts } from '#shared/api/contracts'
import { listInvitations } from '../../../../../services/invitations'
import { route } from '../../../../../utils/route'

export default route(contracts.invitationList, ({ context, params }) => listInvitations(context, params.workspace))
