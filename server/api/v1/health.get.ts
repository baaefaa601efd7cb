import { contracts } from '#shared/api/contracts'
import { ENGINE_VERSION } from '#shared/earth/engineVersion'
import { route } from '../../utils/route'

export default route(contracts.health, () => ({ status: 'ok' as const, version: ENGINE_VERSION }))
