import { contracts } from '#shared/api/contracts'
import { withdrawInvitation } from '../../../../../services/invitations'
import { route } from '../../../../../utils/route'

export default route(contracts.invitationWithdraw, ({ context, principal, params }) => withdrawInvitation(context, principal, params.workspace, params.id))
