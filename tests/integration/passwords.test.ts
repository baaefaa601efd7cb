import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import { Client, demoPassword, signIn } from '../support/client'
import { startServer, type RunningServer } from '../support/server'
import { mailServer } from '../support/smtp'
import { addPerson, addWorkspace, withDatabase, type Place } from '../support/world'

const url = inject('url')
const dataDir = inject('dataDir')
const fresh = 'a sentence to keep'

describe('one’s own password', () => {
  it('changes after the present one is given; other sessions end, this one and tokens go on', async () => {
    const place = addWorkspace(dataDir, 'Passwords')
    addPerson(dataDir, 'ada@passwords.example', { place, role: 'lead' })
    const [here, there] = [await signIn(url, 'ada@passwords.example'), await signIn(url, 'ada@passwords.example')]
    const { secret } = await here.get('tokenCreate', { body: { name: 'x', scope: 'read', days: 1 } })
    expect((await here.refused('passwordChange', 422, { body: { current: 'not it', password: fresh } })).issues![0]!.path).toBe('current')
    await here.refused('passwordChange', 422, { body: { current: demoPassword, password: 'short' } })
    expect((await there.get('sessionRead')).user).not.toBeNull()
    await here.get('passwordChange', { body: { current: demoPassword, password: fresh } })
    expect((await here.get('sessionRead')).user).not.toBeNull()
    expect((await there.get('sessionRead')).user).toBeNull()
    await new Client(url).get('regionList', { params: { workspace: place.workspaceId }, headers: { authorization: `Bearer ${secret}` } })
    await new Client(url).refused('sessionCreate', 401, { body: { email: 'ada@passwords.example', password: demoPassword } })
    await signIn(url, 'ada@passwords.example', fresh)
  })
})

describe('without mail an administrator', () => {
  let place: Place
  let administrator: Client
  beforeAll(async () => {
    place = addWorkspace(dataDir, 'Handed links')
    addPerson(dataDir, 'admin@handed.example', { place, role: 'administrator' })
    administrator = await signIn(url, 'admin@handed.example')
  })

  it('hands over a link that sets a password once and ends all sessions', async () => {
    expect(await new Client(url).get('passwordForgotten', { body: { email: 'reader@handed.example' } })).toEqual({ mail: false })
    const { membershipId: id } = addPerson(dataDir, 'reader@handed.example', { place, role: 'reader' })
    const before = await signIn(url, 'reader@handed.example')
    const older = (await administrator.get('memberPasswordLink', { params: { id } })).link.split('/').at(-1)!
    const token = (await administrator.get('memberPasswordLink', { params: { id } })).link.split('/').at(-1)!
    const guest = new Client(url)
    await guest.refused('invitationRead', 404, { params: { token: older } })
    expect(await guest.get('invitationRead', { params: { token } })).toMatchObject({ kind: 'password', email: 'reader@handed.example', workspaceName: null })
    await guest.refused('invitationAccept', 422, { params: { token }, body: { password: 'short' } })
    expect((await guest.get('invitationAccept', { params: { token }, body: { password: fresh } })).user!.email).toBe('reader@handed.example')
    expect((await before.get('sessionRead')).user).toBeNull()
    await guest.refused('invitationAccept', 404, { params: { token }, body: { password: 'another sentence' } })
    await signIn(url, 'reader@handed.example', fresh)
  })

  it('makes none for somebody who belongs elsewhere too, or operates the instance', async () => {
    const elsewhere = addWorkspace(dataDir, 'Not theirs')
    const { membershipId, userId } = addPerson(dataDir, 'both@handed.example', { place, role: 'reader' })
    withDatabase(dataDir, db => db.prepare('insert into membership (id, workspaceId, userId, role, revision, createdAt) values (?, ?, ?, ?, 1, ?)').run(`${membershipId.slice(0, 25)}X`, elsewhere.workspaceId, userId, 'lead', '2026-01-01T00:00:00.000Z'))
    await administrator.refused('memberPasswordLink', 422, { params: { id: membershipId } })
    const operator = addPerson(dataDir, 'operator@handed.example', { place, role: 'reader', operator: true })
    await administrator.refused('memberPasswordLink', 422, { params: { id: operator.membershipId } })
  })

  it('sees the invitations that are open and withdraws them', async () => {
    const params = { workspace: place.workspaceId }
    const { link, mailed } = await administrator.get('memberInvite', { params, body: { email: 'guest@handed.example', role: 'reader', agencyId: place.agencyId } })
    expect(mailed).toBe(false)
    const { items } = await administrator.get('invitationList', { params })
    expect(items).toMatchObject([{ email: 'guest@handed.example', role: 'reader', agencyName: expect.any(String) }])
    expect(JSON.stringify(items)).not.toContain(link.split('/').at(-1)!)
    await administrator.get('invitationWithdraw', { params: { ...params, id: items[0]!.id } })
    await administrator.refused('invitationWithdraw', 404, { params: { ...params, id: items[0]!.id } })
    expect((await administrator.get('invitationList', { params })).items).toEqual([])
    await new Client(url).refused('invitationRead', 404, { params: { token: link.split('/').at(-1)! } })
  })
})

describe('with mail, in a real conversation with a mail server', () => {
  let post: Awaited<ReturnType<typeof mailServer>>
  let server: RunningServer
  beforeAll(async () => {
    post = await mailServer()
    server = await startServer({ NUXT_MAIL_URL: post.url, NUXT_MAIL_FROM: 'Counterpoise <post@counterpoise.example>', NUXT_MAIL_SITE: 'https://counterpoise.example' })
  })
  afterAll(async () => {
    await server.stop()
    await post.close()
  })
  const arrived = async (count: number) => {
    for (let i = 0; i < 100 && post.received.length < count; i++) await new Promise(wait => setTimeout(wait, 100))
    return post.received
  }
  const linkIn = (text: string) => /https:\/\/counterpoise\.example\/invitation\/([\w-]{43})/.exec(text)![1]!

  it('sends a link to who forgot, under the address that is set and not the one that was asked, and nothing to strangers', async () => {
    const guest = new Client(server.url)
    expect(await guest.get('passwordForgotten', { body: { email: 'stranger@demo.example' } })).toEqual({ mail: true })
    expect(await guest.get('passwordForgotten', { body: { email: 'Reader@demo.example' }, headers: { 'x-forwarded-host': 'evil.example' } })).toEqual({ mail: true })
    const [letter, ...more] = await arrived(1)
    expect(more).toEqual([])
    expect(letter).toMatchObject({ from: 'post@counterpoise.example', to: ['reader@demo.example'] })
    await guest.get('invitationAccept', { params: { token: linkIn(letter!.text) }, body: { password: fresh } })
    await signIn(server.url, 'reader@demo.example', fresh)
    expect(withDatabase(server.dataDir, db => db.prepare('select text from outbox').pluck().all())).toEqual([''])
  })

  it('sends an invitation as well as showing its link', async () => {
    const administrator = await signIn(server.url, 'admin@demo.example')
    const workspace = (await administrator.get('sessionRead')).memberships[0]!.workspaceId
    const { link, mailed } = await administrator.get('memberInvite', { params: { workspace }, body: { email: 'new@mail.example', role: 'reader', agencyId: null } })
    expect(mailed).toBe(true)
    const letter = (await arrived(2)).at(-1)!
    expect(letter.to).toEqual(['new@mail.example'])
    expect(link).toBe(`https://counterpoise.example/invitation/${linkIn(letter.text)}`)
  })
})
