import { getRequestIP } from 'h3'
import { eq } from 'drizzle-orm'
import { contracts } from '#shared/api/contracts'
import { schema } from '../../../database/client'
import { acceptPasswordLink } from '../../../services/passwords'
import { acceptInvitation, invitationView } from '../../../services/people'
import { meView, principalOfUser, startSession } from '../../../services/sessions'
import { giveCookie, route } from '../../../utils/route'

export default route(contracts.invitationAccept, async ({ event, context, params, body }) => {
  const userId = invitationView(context, params.token).kind === 'password'
    ? await acceptPasswordLink(context, params.token, body.password)
    : await acceptInvitation(context, context.throttle, getRequestIP(event) ?? '', params.token, body)
  const user = context.db.select().from(schema.user).where(eq(schema.user.id, userId)).get()!
  await giveCookie(event, startSession(context, userId))
  return meView(context, principalOfUser(context, user))
})
