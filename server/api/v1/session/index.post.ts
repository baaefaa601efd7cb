import { getRequestIP } from 'h3'
import { contracts } from '#shared/api/contracts'
import { checkPassword } from '../../../services/people'
import { meView, principalOfUser, startSession } from '../../../services/sessions'
import { giveCookie, route } from '../../../utils/route'

export default route(contracts.sessionCreate, async ({ event, context, body }) => {
  const user = await checkPassword(context, context.throttle, getRequestIP(event) ?? '', body.email, body.password)
  await giveCookie(event, startSession(context, user.id))
  return meView(context, principalOfUser(context, user))
})
