import { defineEventHandler, getRequestHeader, getRequestHost, setResponseHeaders } from 'h3'
import { Problem } from '../utils/problem'
import { sendProblem } from '../utils/route'

const hostOf = (origin: string) => URL.canParse(origin) ? new URL(origin).host : ''
const safe = new Set(['GET', 'HEAD', 'OPTIONS'])

/** Headers of the interface's answers, and a refusal of writes that another site's page sends with our cookie. */
export default defineEventHandler((event) => {
  if (event.path.startsWith('/api/')) {
    setResponseHeaders(event, { 'content-security-policy': 'default-src \'none\'; frame-ancestors \'none\'', 'cache-control': 'no-store' })
  }
  if (safe.has(event.method) || getRequestHeader(event, 'authorization')?.startsWith('Bearer ')) return
  const site = getRequestHeader(event, 'sec-fetch-site')
  const origin = getRequestHeader(event, 'origin')
  const foreign = (site && site !== 'same-origin' && site !== 'none')
    || (origin && hostOf(origin) !== getRequestHost(event, { xForwardedHost: true }))
  if (foreign) return sendProblem(event, new Problem(403, 'cross-site', 'This request came from another site’s page.'))
})
