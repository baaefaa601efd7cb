import { contracts } from '#shared/api/contracts'
import { endSession } from '../../../services/sessions'
import { route, sessionToken, takeCookie } from '../../../utils/route'

export default route(contracts.sessionDelete, async ({ event, context }) => {
  const token = await sessionToken(event)
  if (token) endSession(context, token)
  await takeCookie(event)
})
