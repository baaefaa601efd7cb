import { describe, expect, inject, it } from 'vitest'
import { demo, type Client } from '../support/client'
import { newcomer } from '../support/world'

const url = inject('url')

/** The heading of a page as the server sends it, with its status. */
async function heading(client: Client, path: string) {
  const { status, text } = await client.send('GET', path, { headers: { accept: 'text/html' } })
  return { status, text: (/<h1[^>]*>(.*?)<\/h1>/s.exec(text)?.[1] ?? '').replace(/<[^>]+>/g, '').trim() }
}

describe('a page that somebody has no right to', () => {
  it('says so by its role, page by page', async () => {
    const [administrator, reader] = await Promise.all([demo(url, 'admin'), demo(url, 'reader')])
    for (const path of ['/map', '/regions', '/grids', '/observations', '/scenarios']) expect(await heading(administrator, path), path).toEqual({ status: 200, text: 'As administrator you do not open this page.' })
    for (const path of ['/people', '/log', '/regions/table']) expect((await heading(reader, path)).text, path).toBe('As reader you do not open this page.')
    expect((await heading(reader, '/observations')).text).not.toMatch(/do not open/)
  })

  it('is refused where it is a page of one row', async () => {
    const [administrator, lead] = await Promise.all([demo(url, 'admin'), demo(url, 'lead')])
    const workspace = (await lead.get('sessionRead')).memberships[0]!.workspaceId
    const region = (await lead.get('regionList', { params: { workspace } })).items[0]!.id
    expect(await heading(administrator, `/regions/${region}`)).toEqual({ status: 403, text: 'As administrator you do not open this page' })
  })

  it('leads on where there is no workspace at all', async () => {
    const nobody = await newcomer(url, inject('dataDir'), {})
    for (const path of ['/map', '/regions', '/observations', '/scenarios', '/publications', '/grids']) expect(await heading(nobody, path), path).toEqual({ status: 200, text: 'You belong to no workspace.' })
  })
})
