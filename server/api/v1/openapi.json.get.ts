import { contracts } from '#shared/api/contracts'
import { openApiDocument } from '#shared/api/openapi'
import { route } from '../../utils/route'

export default route(contracts.openapi, () => openApiDocument())
