import { contracts } from '#shared/api/contracts'
import { evaluate } from '#shared/earth/evaluate'
import type { EvaluateRequest } from '#shared/earth/evaluateTypes'
import { route } from '../../utils/route'

export default route(contracts.evaluate, ({ context, body }) => evaluate(body as EvaluateRequest, context.earth))
