import { beforeAll, describe, expect, inject, it } from 'vitest'
import { Client, signIn } from '../support/client'
import { addPerson, addWorkspace, square, withDatabase, type Place } from '../support/world'

const url = inject('url')
const dataDir = inject('dataDir')
let place: Place
let person: Client
const params = () => ({ workspace: place.workspaceId })
const bearer = (secret: string) => ({ authorization: `Bearer ${secret}` })
const make = (scope: 'read' | 'write', name = 'a script') => person.get('tokenCreate', { body: { name, scope, days: 30 } })
const region = () => ({ params: params(), body: { name: 'By a script', kind: 'lake', agencyId: place.agencyId, geometry: square(3, 3) } })
const script = new Client(url)

beforeAll(async () => {
  place = addWorkspace(dataDir, 'Tokens')
  addPerson(dataDir, 'hydrologist@tokens.example', { place, role: 'hydrologist' })
  person = await signIn(url, 'hydrologist@tokens.example')
})

describe('a token', () => {
  it('shows its secret once, and the database holds none of it', async () => {
    const { secret, ...made } = await make('read')
    expect(secret).toMatch(/^cpt_[\w-]{43}$/)
    const { items } = await person.get('tokenList')
    expect(items).toContainEqual(made)
    expect(JSON.stringify(items)).not.toContain(secret)
    const stored = withDatabase(dataDir, db => JSON.stringify([db.prepare('select * from token').all(), db.prepare('select * from log').all(), db.prepare('select * from idempotency').all()]))
    expect(stored).not.toContain(secret)
  })

  it('does what its person may, and the log says who and by which token', async () => {
    const { secret } = await make('write', 'monthly upload')
    const headers = { ...bearer(secret), 'sec-fetch-site': 'cross-site', 'origin': 'https://elsewhere.example' }
    expect((await script.get('sessionRead', { headers })).user!.email).toBe('hydrologist@tokens.example')
    const { id } = await script.get('regionCreate', { ...region(), headers })
    await script.refused('regionCreate', 403, { ...region(), body: { ...region().body, kind: 'ice-sector' }, headers })
    const entry = withDatabase(dataDir, db => db.prepare('select actor from log where entityId = ?').get(id)) as { actor: string }
    expect(entry.actor).toMatch(/, token “monthly upload”$/)
    expect((await person.get('tokenList')).items.find(token => token.name === 'monthly upload')!.lastUsedAt).not.toBeNull()
  })

  it('for reading reads and evaluates, and changes nothing', async () => {
    const { secret } = await make('read')
    const headers = bearer(secret)
    await script.get('regionList', { params: params(), headers })
    await script.get('evaluate', { headers, body: { regions: [{ id: 'a', geometry: square(0, 0), massGt: 1 }], settings: { ocean: 'none' } } })
    expect((await script.refused('regionCreate', 403, { ...region(), headers })).code).toBe('scope')
    await script.refused('scenarioCreate', 403, { params: params(), headers, body: { name: 'x', draft: {} } })
  })

  it('of either scope reaches neither tokens nor password', async () => {
    for (const scope of ['read', 'write'] as const) {
      const { id, secret } = await make(scope)
      const headers = bearer(secret)
      await script.refused('tokenList', 403, { headers })
      await script.refused('tokenCreate', 403, { headers, body: { name: 'more', scope: 'write', days: 366 } })
      await script.refused('tokenRevoke', 403, { headers, params: { id } })
      await script.refused('passwordChange', 403, { headers, body: { current: 'x', password: 'something quite new' } })
    }
  })

  it('is nobody’s when revoked, run out, or made up; the browser’s cookie does not stand in for it', async () => {
    const { id, secret } = await make('write')
    await person.get('tokenRevoke', { params: { id } })
    const old = await make('read')
    withDatabase(dataDir, db => db.prepare('update token set expiresAt = ? where id = ?').run('2020-01-01T00:00:00.000Z', old.id))
    for (const wrong of [secret, old.secret, 'cpt_made-up', secret.slice(4)]) {
      expect((await person.refused('regionList', 401, { params: params(), headers: bearer(wrong) })).code).toBe('token')
    }
    await person.get('regionList', { params: params() })
  })

  it('ends where its person ends: removed from the workspace, the token finds nothing there', async () => {
    const { membershipId } = addPerson(dataDir, 'leaving@tokens.example', { place, role: 'lead' })
    const leaving = await signIn(url, 'leaving@tokens.example')
    const { secret } = await leaving.get('tokenCreate', { body: { name: 'x', scope: 'write', days: 1 } })
    await script.get('regionList', { params: params(), headers: bearer(secret) })
    withDatabase(dataDir, db => db.prepare('update membership set deletedAt = ? where id = ?').run('2026-01-01T00:00:00.000Z', membershipId))
    await script.refused('regionList', 404, { params: params(), headers: bearer(secret) })
  })

  it('stands in the OpenAPI document as a way in, except to the account', async () => {
    const { json } = await script.send('GET', '/api/v1/openapi.json') as { json: { security: object[], components: { securitySchemes: Record<string, object> }, paths: Record<string, Record<string, { security?: object[] }>> } }
    expect(json.components.securitySchemes.token).toMatchObject({ type: 'http', scheme: 'bearer' })
    expect(json.security).toContainEqual({ token: [] })
    expect(json.paths['/api/v1/tokens']!.post!.security).toEqual([{ session: [] }])
  })
})
