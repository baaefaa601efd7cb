import { setResponseHeaders } from 'h3'
import { contracts } from '#shared/api/contracts'
import { readVersionOriginal } from '../../../../services/massSeries'
import { attachment, route } from '../../../../utils/route'

export default route(contracts.originalRead, ({ event, context, principal, params }) => {
  const { name, bytes } = readVersionOriginal(context, principal, params.id)
  setResponseHeaders(event, { 'content-type': 'application/octet-stream', 'content-disposition': attachment(name) })
  return bytes
})
