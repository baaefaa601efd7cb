import { getRequestIP } from 'h3'
import { contracts } from '#shared/api/contracts'
import { forgotPassword } from '../../services/passwords'
import { route } from '../../utils/route'

export default route(contracts.passwordForgotten, ({ event, context, body }) => forgotPassword(context, getRequestIP(event) ?? '', body.email))
