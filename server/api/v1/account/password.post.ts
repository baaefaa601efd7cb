import { getRequestIP } from 'h3'
import { contracts } from '#shared/api/contracts'
import { changePassword } from '../../../services/passwords'
import { route, sessionToken } from '../../../utils/route'

export default route(contracts.passwordChange, async ({ event, context, principal, body }) =>
  changePassword(context, principal, getRequestIP(event) ?? '', await sessionToken(event), body))
