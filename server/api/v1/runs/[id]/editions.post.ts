import { contracts } from '#shared/api/contracts'
import { publish } from '../../../../services/editions'
import { route } from '../../../../utils/route'

export default route(contracts.editionCreate, ({ context, principal, params, body }) => publish(context, principal, params.id, body))
