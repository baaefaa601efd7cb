import { contracts } from '#shared/api/contracts'
import { regionMonths } from '../../../../../services/regionMonths'
import { route } from '../../../../../utils/route'

export default route(contracts.regionMonths, ({ context, params }) => regionMonths(context, params.workspace))
