import { contracts } from '#shared/api/contracts'
import { validationView } from '../../services/validation'
import { route } from '../../utils/route'

export default route(contracts.validationRead, ({ context }) => validationView(context))
