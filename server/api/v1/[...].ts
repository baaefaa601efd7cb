import { defineEventHandler } from 'h3'
import { Problem } from '../../utils/problem'
import { sendProblem } from '../../utils/route'

/** Whatever no route answers. */
export default defineEventHandler(event => sendProblem(event, new Problem(404, 'not-found', `There is no ${event.method} ${event.path.split('?')[0]} here. The interface is described in /api/v1/openapi.json.`)))
