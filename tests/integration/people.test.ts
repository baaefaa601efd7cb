import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import { Client, demo, demoPassword, signIn } from '../support/client'
import { startServer, type RunningServer } from '../support/server'
import { addWorkspace, newcomer, square, type Place } from '../support/world'

const url = inject('url')

describe('asking somebody in', () => {
  let place: Place
  let administrator: Client
  const params = () => ({ workspace: place.workspaceId })
  const invite = async (email: string, role = 'hydrologist') => {
    const { link } = await administrator.get('memberInvite', { params: params(), body: { email, role, agencyId: place.agencyId } })
    expect(link).toMatch(new RegExp(`^${url}/invitation/[\\w-]{40,}$`))
    return link.split('/').at(-1)!
  }
  beforeAll(async () => {
    place = addWorkspace(inject('dataDir'), 'People')
    administrator = await newcomer(url, inject('dataDir'), { place, role: 'administrator' })
  })

  it('gives a link that makes one account, once', async () => {
    const token = await invite('new@people.example')
    const guest = new Client(url)
    expect(await guest.get('invitationRead', { params: { token } })).toMatchObject({ kind: 'member', email: 'new@people.example', workspaceName: 'People', role: 'hydrologist', knownAccount: false })
    await guest.refused('invitationAccept', 422, { params: { token }, body: { name: 'New', password: 'short' } })
    await guest.refused('invitationAccept', 422, { params: { token }, body: { password: 'long enough a password' } })
    const { user, memberships } = await guest.get('invitationAccept', { params: { token }, body: { name: 'New Person', password: 'long enough a password' } })
    expect(user).toMatchObject({ name: 'New Person', email: 'new@people.example', operator: false })
    expect(memberships).toMatchObject([{ role: 'hydrologist', workspaceId: place.workspaceId, agencyId: place.agencyId }])
    expect((await guest.get('sessionRead')).user!.id).toBe(user!.id)
    await new Client(url).refused('invitationAccept', 404, { params: { token }, body: { name: 'Second', password: 'long enough a password' } })
    await new Client(url).refused('invitationRead', 404, { params: { token } })
    await guest.get('regionCreate', { params: params(), body: { name: 'First work', kind: 'lake', agencyId: place.agencyId, geometry: square(3, 3) } })
  })

  it('gives a person who has an account a second role, after the password of that account', async () => {
    const token = await invite('new@people.example', 'glaciologist')
    const guest = new Client(url)
    expect(await guest.get('invitationRead', { params: { token } })).toMatchObject({ knownAccount: true })
    await guest.refused('invitationAccept', 401, { params: { token }, body: { password: 'not the password' } })
    const { memberships } = await guest.get('invitationAccept', { params: { token }, body: { password: 'long enough a password' } })
    expect(memberships.map(m => m.role).sort()).toEqual(['glaciologist', 'hydrologist'])
  })

  it('ends with the person’s removal: what they could do they can no more, at once', async () => {
    const token = await invite('gone@people.example', 'lead')
    const guest = new Client(url)
    await guest.get('invitationAccept', { params: { token }, body: { name: 'Gone', password: 'long enough a password' } })
    await guest.get('regionList', { params: params() })
    const member = (await administrator.get('memberList', { params: params() })).items.find(m => m.email === 'gone@people.example')!
    await administrator.get('memberRemove', { params: { id: member.id }, query: { revision: member.revision } })
    await guest.refused('regionList', 404, { params: params() })
  })

  it('leaves a workspace at least one administrator', async () => {
    const self = (await administrator.get('memberList', { params: params() })).items.find(m => m.role === 'administrator')!
    await administrator.refused('memberRemove', 422, { params: { id: self.id }, query: { revision: self.revision } })
    await administrator.refused('memberChange', 422, { params: { id: self.id }, body: { revision: self.revision, role: 'reader', agencyId: null } })
  })

  it('changes a role for who saw the latest revision', async () => {
    await new Client(url).get('invitationAccept', { params: { token: await invite('risen@people.example', 'reader') }, body: { name: 'Risen', password: 'long enough a password' } })
    const member = (await administrator.get('memberList', { params: params() })).items.find(m => m.email === 'risen@people.example')!
    expect(await administrator.get('memberChange', { params: { id: member.id }, body: { revision: 1, role: 'lead', agencyId: null } })).toEqual({ revision: 2 })
    await administrator.refused('memberChange', 409, { params: { id: member.id }, body: { revision: 1, role: 'reader', agencyId: null } })
  })
})

describe('an instance without the demo', () => {
  let server: RunningServer
  const linkOf = () => /http:\/\/\S+\/invitation\/(\S+)/.exec(server.output())?.[1]
  beforeAll(async () => {
    server = await startServer({ NUXT_DEMO: 'off' })
  })
  afterAll(() => server.stop())

  it('prints a one-time link that makes its first operator, administrator and lead', async () => {
    const token = linkOf()!
    expect(server.output()).toContain(`${server.url}/invitation/${token}`)
    const guest = new Client(server.url)
    expect((await guest.get('sessionRead')).demo).toBe(false)
    expect(await guest.get('invitationRead', { params: { token } })).toMatchObject({ kind: 'operator', email: null })
    const body = { email: 'first@instance.example', name: 'First Person', password: 'long enough a password' }
    await guest.refused('invitationAccept', 422, { params: { token }, body })
    const { user, memberships } = await guest.get('invitationAccept', { params: { token }, body: { ...body, workspaceName: 'Water accounts', agencyName: 'Water office' } })
    expect(user).toMatchObject({ email: 'first@instance.example', operator: true })
    expect(memberships.map(m => [m.workspaceName, m.role, m.invented]).sort()).toEqual([['Water accounts', 'administrator', false], ['Water accounts', 'lead', false]])
    await new Client(server.url).refused('invitationAccept', 404, { params: { token }, body: { ...body, workspaceName: 'Mine', agencyName: 'Mine' } })
  })

  it('has no demo account', async () => {
    await new Client(server.url).refused('sessionCreate', 401, { body: { email: 'lead@demo.example', password: demoPassword } })
    expect((await new Client(server.url).send('GET', '/sign-in')).text).not.toContain('demo.example')
  })

  it('keeps people, sessions and secret over a restart, and prints no second link', async () => {
    const client = await signIn(server.url, 'first@instance.example', 'long enough a password')
    const { dataDir } = server
    await server.stop({ keepData: true })
    const again = await startServer({ NUXT_DEMO: 'off' }, dataDir)
    const same = new Client(again.url)
    same.cookie = client.cookie
    expect((await same.get('sessionRead')).user?.email).toBe('first@instance.example')
    expect(again.output()).not.toContain('/invitation/')
    await again.stop()
  })
})

describe('where a server listens', () => {
  it('is this machine alone unless HOST says otherwise, and beyond it there is no demo', async () => {
    const open = await startServer({ HOST: '0.0.0.0' })
    try {
      expect((await new Client(open.url).get('sessionRead')).demo).toBe(false)
      await new Client(open.url).refused('sessionCreate', 401, { body: { email: 'lead@demo.example', password: demoPassword } })
      expect(open.output()).toContain('/invitation/')
    }
    finally {
      await open.stop()
    }
    expect((await (await demo(url, 'lead')).get('sessionRead')).demo).toBe(true)
  })
})
