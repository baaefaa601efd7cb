import { describe, expect, inject, it } from 'vitest'
import { Client, demo, demoPassword, problemOf, signIn } from '../support/client'
import { addPerson, addWorkspace, withDatabase } from '../support/world'

const url = inject('url')
const dataDir = inject('dataDir')
const credentials = { email: 'reader@demo.example', password: demoPassword }

describe('signing in and out', () => {
  it('gives a session that ends on the server, not only in the browser', async () => {
    const client = await signIn(url, credentials.email)
    const { user, memberships, demo } = await client.get('sessionRead')
    expect(user).toMatchObject({ email: credentials.email, operator: false })
    expect(memberships.map(m => m.role)).toEqual(['reader'])
    expect(demo).toBe(true)

    const kept = client.cookie
    await client.get('sessionDelete')
    expect(client.cookie).toBe('')
    const thief = new Client(url)
    thief.cookie = kept
    expect((await thief.get('sessionRead')).user).toBeNull()
    await thief.refused('evaluate', 401, { body: {} })
  })

  it('tells no more of an unknown address than of a wrong password', async () => {
    const client = new Client(url)
    const wrong = await client.refused('sessionCreate', 401, { body: { email: 'lead@demo.example', password: 'not the password' } })
    const unknown = await client.refused('sessionCreate', 401, { body: { email: 'nobody@demo.example', password: 'not the password' } })
    expect(unknown).toEqual(wrong)
    expect(client.cookie).toBe('')
  })

  it('takes the address in any case and refuses what is no pair of texts', async () => {
    expect((await signIn(url, 'Reader@Demo.Example')).cookie).not.toBe('')
    const problem = await new Client(url).refused('sessionCreate', 422, { body: { email: 'reader@demo.example', password: 7 } })
    expect(problem.issues).toEqual([expect.objectContaining({ path: 'password' })])
    problemOf(await new Client(url).send('POST', '/api/v1/session', { body: '{"email":' }), 400)
  })

  it('stops taking tries for an account after eight failures, the right password included, and for that account alone', async () => {
    addPerson(dataDir, 'tried@throttle.example')
    const client = new Client(url)
    for (let i = 0; i < 8; i++) await client.refused('sessionCreate', 401, { body: { email: 'tried@throttle.example', password: `wrong ${i}` } })
    const problem = await client.refused('sessionCreate', 429, { body: { email: 'Tried@throttle.example', password: demoPassword } })
    expect(problem.detail).toMatch(/ten minutes/i)
    await signIn(url, credentials.email)
  })

  it('stores no password and no session in the clear', async () => {
    const client = await signIn(url, credentials.email)
    const stored = withDatabase(dataDir, db => ({
      hashes: db.prepare('select passwordHash from user').pluck().all() as string[],
      sessions: db.prepare('select hash from session').pluck().all() as string[],
    }))
    for (const hash of stored.hashes) expect(hash).toMatch(/^\$scrypt\$/)
    for (const hash of stored.sessions) expect(client.cookie).not.toContain(hash)
  })

  it('forgets a session that has run out', async () => {
    const place = addWorkspace(dataDir, 'Expiry')
    const { userId } = addPerson(dataDir, 'late@expiry.example', { place, role: 'reader' })
    const client = await signIn(url, 'late@expiry.example')
    expect((await client.get('sessionRead')).user?.id).toBe(userId)
    withDatabase(dataDir, db => db.prepare('update session set expiresAt = ? where userId = ?').run('2000-01-01T00:00:00.000Z', userId))
    expect((await client.get('sessionRead')).user).toBeNull()
  })
})

describe('the cookie', () => {
  const cookieOf = async (headers: Record<string, string>) =>
    (await new Client(url).send('POST', '/api/v1/session', { body: credentials, headers })).headers.getSetCookie().find(c => c.startsWith('counterpoise-session='))!

  it('is out of reach of scripts and other sites, and Secure only behind TLS', async () => {
    const plain = await cookieOf({})
    expect(plain).toMatch(/; HttpOnly/i)
    expect(plain).toMatch(/; SameSite=Lax/i)
    expect(plain).not.toMatch(/; Secure/i)
    expect(await cookieOf({ 'x-forwarded-proto': 'https' })).toMatch(/; Secure/i)
  })

  it('is not given to visitors', async () => {
    for (const path of ['/', '/sign-in', '/api/v1/editions', '/api/v1/session']) {
      expect((await new Client(url).send('GET', path)).headers.getSetCookie(), path).toEqual([])
    }
  })

  it('is refused when somebody made it up', async () => {
    const forger = new Client(url)
    forger.cookie = 'counterpoise-session=Fe26.2**made*up*by*nobody'
    expect((await forger.get('sessionRead')).user).toBeNull()
  })
})

describe('writes from another site’s page', () => {
  const foreign: Record<string, string>[] = [
    { 'sec-fetch-site': 'cross-site' }, { 'sec-fetch-site': 'same-site' }, { origin: 'https://elsewhere.example' }, { origin: 'null' },
  ]

  it.each(foreign)('are refused: %o', async (headers) => {
    const client = await demo(url, 'lead')
    problemOf(await client.send('POST', '/api/v1/session', { body: credentials, headers }), 403)
    problemOf(await client.send('DELETE', '/api/v1/session', { headers }), 403)
    expect((await client.get('sessionRead')).user).not.toBeNull()
  })

  it('are taken from this site’s own pages and from programs', async () => {
    const own = { 'sec-fetch-site': 'same-origin', 'origin': url }
    for (const headers of [own, {}]) expect((await new Client(url).send('POST', '/api/v1/session', { body: credentials, headers })).status).toBe(200)
  })

  it('reads stay open to links from anywhere', async () => {
    expect((await new Client(url).send('GET', '/api/v1/editions', { headers: { 'sec-fetch-site': 'cross-site' } })).status).toBe(200)
  })

  it('a bearer token is no way round: it is no session yet', async () => {
    problemOf(await new Client(url).send('POST', '/api/v1/evaluate', { body: {}, headers: { 'authorization': 'Bearer x', 'sec-fetch-site': 'cross-site' } }), 401)
    const client = await demo(url, 'lead')
    const answer = await client.send('DELETE', '/api/v1/session', { headers: { 'authorization': 'Bearer x', 'sec-fetch-site': 'cross-site' } })
    // The cookie counts for nothing where a token is sent, so nobody was signed out.
    expect((await client.get('sessionRead')).user, `answered ${answer.status}`).not.toBeNull()
  })
})
