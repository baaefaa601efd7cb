import { getRequestURL } from 'h3'
import { contracts } from '#shared/api/contracts'
import { memberPasswordLink } from '../../../../services/passwords'
import { route } from '../../../../utils/route'

export default route(contracts.memberPasswordLink, ({ event, context, principal, params }) =>
  memberPasswordLink(context, principal, params.id, getRequestURL(event, { xForwardedHost: true, xForwardedProto: true }).origin))
