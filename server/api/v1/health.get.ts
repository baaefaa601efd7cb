import { contracts } from '#shared/api/contracts'
import { ENGINE_VERSION } from '#shared/earth/engineVersion'
import { oceanModes, type OceanMode } from '#shared/types/domain'
import { route } from '../../utils/route'

const withoutFields: readonly OceanMode[] = ['none', 'uniform']

export default route(contracts.health, ({ context: { earth } }) => ({
  status: 'ok' as const, version: ENGINE_VERSION,
  oceans: earth.fields ? [...oceanModes] : [...withoutFields], defaultOcean: earth.defaultOcean,
}))
