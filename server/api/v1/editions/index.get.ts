import { contracts } from '#shared/api/contracts'
import { publicIndex } from '../../../services/editions'
import { route } from '../../../utils/route'

export default route(contracts.editionIndex, ({ context }) => publicIndex(context))
