import { setResponseHeaders } from 'h3'
import { contracts } from '#shared/api/contracts'
import { authorise } from '../../../../../services/change'
import { compareWith } from '../../../../../services/comparisons'
import { exportRun, exportTypes } from '../../../../../services/exports'
import { observedLabelOf } from '../../../../../services/observed'
import { runRow } from '../../../../../services/runs'
import { attachment, route } from '../../../../../utils/route'

export default route(contracts.runFile, async ({ event, context, principal, params, query }) => {
  const run = runRow(context, params.id)
  authorise(principal, 'report.export', { workspaceId: run.workspaceId })
  const observed = query.observed ?? null
  const data = await exportRun(context, params.file, {
    run, comparison: observed ? await compareWith(context, run, { ...query, observed }) : null, observed: observed ? observedLabelOf(context, observed) : null,
  })
  setResponseHeaders(event, { 'content-type': exportTypes[params.file], 'content-disposition': attachment(`counterpoise-run-${run.n}-${params.file}`) })
  return data
})
