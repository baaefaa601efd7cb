import { contracts } from '#shared/api/contracts'
import { seaLevelOfEdition } from '../../../../../services/seaLevel'
import { route } from '../../../../../utils/route'

export default route(contracts.editionSeaLevel, ({ context, params }) => seaLevelOfEdition(context, params.slug, params.n))
