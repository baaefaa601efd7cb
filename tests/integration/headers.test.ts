import { describe, expect, inject, it } from 'vitest'
import { Client, demo } from '../support/client'

const url = inject('url')

describe('security headers', () => {
  it.each(['/', '/sign-in', '/no-such-page', '/api/v1/health', '/api/v1/no-such-route', '/icon.svg'])('stand on %s', async (path) => {
    const { headers } = await new Client(url).send('GET', path)
    expect(headers.get('x-content-type-options')).toBe('nosniff')
    // An error page is stricter still.
    expect(headers.get('referrer-policy')).toMatch(/^(same-origin|no-referrer)$/)
    expect(headers.get('cross-origin-opener-policy')).toBe('same-origin')
    expect(headers.get('permissions-policy')).toContain('geolocation=()')
    expect(headers.get('x-powered-by')).toBeNull()
  })

  it('a page may load its own things only, and its scripts and style sheets carry a fresh nonce', async () => {
    const nonces = new Set<string>()
    for (let i = 0; i < 2; i++) {
      const page = await new Client(url).send('GET', '/')
      const policy = page.headers.get('content-security-policy')!
      const nonce = /'nonce-([^']+)'/.exec(policy)![1]!
      nonces.add(nonce)
      const directives = new Map(policy.split('; ').map((d): [string, string] => [d.split(' ')[0]!, d.slice(d.indexOf(' ') + 1)]))
      expect(directives.get('default-src')).toBe('\'self\'')
      expect(directives.get('script-src')).toBe(`'self' 'nonce-${nonce}' 'wasm-unsafe-eval'`)
      expect(directives.get('style-src')).toBe(`'self' 'nonce-${nonce}'`)
      expect(directives.get('connect-src')).toBe('\'self\'')
      expect(directives.get('object-src')).toBe('\'none\'')
      expect(directives.get('frame-ancestors')).toBe('\'none\'')
      expect(directives.get('base-uri')).toBe('\'none\'')
      expect(policy).not.toMatch(/'unsafe-eval|https?:|\*/)
      const scripts = page.text.match(/<script[^>]*>/g)!
      expect(scripts.length).toBeGreaterThan(0)
      for (const tag of scripts) expect(tag).toContain(`nonce="${nonce}"`)
      expect(page.text).not.toMatch(/\son\w+="/)
    }
    expect(nonces.size).toBe(2)
  })

  it('an error page has the policy too', async () => {
    const page = await new Client(url).send('GET', '/no-such-page')
    expect(page.status).toBe(404)
    expect(page.headers.get('content-security-policy')).toContain('frame-ancestors \'none\'')
  })

  it('an answer of the interface is nobody’s page and is not kept', async () => {
    for (const path of ['/api/v1/health', '/api/v1/openapi.json', '/api/v1/no-such-route']) {
      const { headers } = await new Client(url).send('GET', path)
      expect(headers.get('content-security-policy')).toBe('default-src \'none\'; frame-ancestors \'none\'')
      expect(headers.get('cache-control')).toBe('no-store')
    }
  })

  it('a page of somebody signed in is not kept by caches between', async () => {
    const page = await (await demo(url, 'lead')).send('GET', '/regions')
    expect(page.status).toBe(200)
    expect(page.headers.get('cache-control') ?? '').toMatch(/no-store|private/)
  })
})

describe('refusals', () => {
  it('an unknown route, a body that is no JSON and a body too large each say what is wrong', async () => {
    const client = await demo(url, 'lead')
    const unknown = await client.send('GET', '/api/v1/basins')
    expect(unknown.json).toMatchObject({ type: 'urn:counterpoise:problem:not-found', status: 404, code: 'not-found' })
    expect(unknown.text).toContain('/api/v1/openapi.json')
    const broken = await client.send('POST', '/api/v1/evaluate', { body: '{ "regions": [' })
    expect(broken.json).toMatchObject({ status: 400, code: 'not-json' })
    const large = await client.send('POST', '/api/v1/session', { body: JSON.stringify({ email: 'a', password: 'x'.repeat(2 * 1024 * 1024) }) })
    expect(large.json).toMatchObject({ status: 413, code: 'too-large' })
    for (const answer of [unknown, broken, large]) expect(answer.headers.get('content-type')).toBe('application/problem+json')
  })

  it('every fault of a body is named with its place', async () => {
    const client = await demo(url, 'admin')
    const { memberships } = await client.get('sessionRead')
    const problem = await client.refused('memberInvite', 422, { params: { workspace: memberships[0]!.workspaceId }, body: { email: 'no address', role: 'king', agencyId: null } })
    expect(problem.issues!.map(i => i.path).sort()).toEqual(['email', 'role'])
    for (const issue of problem.issues!) expect(issue.message.length).toBeGreaterThan(5)
  })
})
