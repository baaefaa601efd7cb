import { contracts } from '#shared/api/contracts'
import { createGravity } from '../../../../../services/gravity'
import { observedRow, observedSummary } from '../../../../../services/observed'
import { route } from '../../../../../utils/route'

export default route(contracts.gravityCreate, async ({ context, principal, params, upload, body }) =>
  observedSummary(context, principal, observedRow(context, await createGravity(context, principal, params.workspace, upload, body))))
