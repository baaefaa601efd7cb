import { setResponseHeaders } from 'h3'
import { contracts } from '#shared/api/contracts'
import { contentOf, editionRow, editionView } from '../../../../../services/editions'
import { exportRun, exportTypes } from '../../../../../services/exports'
import { runRow } from '../../../../../services/runs'
import { attachment, route } from '../../../../../utils/route'

export default route(contracts.editionFile, async ({ event, context, params }) => {
  const edition = editionRow(context, params.slug, params.n)
  const { comparison, observed } = contentOf(edition)
  const data = await exportRun(context, params.file, { run: runRow(context, edition.runId), comparison, observed, edition: editionView(context, edition) })
  setResponseHeaders(event, { 'content-type': exportTypes[params.file], 'content-disposition': attachment(`${edition.slug}-${edition.n}-${params.file}`) })
  return data
})
