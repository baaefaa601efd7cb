import { contracts } from '#shared/api/contracts'
import { invitationView } from '../../../services/people'
import { route } from '../../../utils/route'

export default route(contracts.invitationRead, ({ context, params }) => invitationView(context, params.token))
