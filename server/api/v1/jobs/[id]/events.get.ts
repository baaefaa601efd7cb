import { createEventStream } from 'h3'
import { contracts } from '#shared/api/contracts'
import { route } from '../../../../utils/route'

/** Pushes the job's state at each change and once at the start; closes when the job has ended. */
export default route(contracts.jobEvents, ({ event, context, principal, params }) => {
  const now = context.jobs.view(principal, params.id)
  const stream = createEventStream(event)
  const ended = (state: string) => state === 'done' || state === 'failed' || state === 'cancelled'
  const push = async (view: typeof now) => {
    await stream.push(JSON.stringify(view))
    if (ended(view.state)) await stream.close()
  }
  const stop = context.jobs.watch(params.id, view => void push(view))
  stream.onClosed(() => stop())
  void push(now)
  return stream.send()
})
