import { contracts } from '#shared/api/contracts'
import { parseObserved, type ObservedOptions } from '#shared/observed/parse'
import { reduceObserved } from '#shared/observed/reduce'
import { uploadText } from '../../../services/originals'
import { route } from '../../../utils/route'

export default route(contracts.observedReduce, async ({ upload, body }) => {
  const { csv, format } = body as ObservedOptions
  return reduceObserved(parseObserved(await uploadText(upload), { csv, format }), body)
})
