import { contracts } from '#shared/api/contracts'
import { readEdition } from '../../../../services/editions'
import { route } from '../../../../utils/route'

export default route(contracts.editionRead, ({ context, params, query }) => readEdition(context, params.slug, query.n))
