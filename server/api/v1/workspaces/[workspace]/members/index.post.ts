import { getRequestURL } from 'h3'
import { contracts } from '#shared/api/contracts'
import { inviteMember } from '../../../../../services/people'
import { route } from '../../../../../utils/route'

export default route(contracts.memberInvite, ({ event, context, principal, params, body }) =>
  inviteMember(context, principal, params.workspace, body, getRequestURL(event, { xForwardedHost: true, xForwardedProto: true }).origin))
