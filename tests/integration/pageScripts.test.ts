import { readFileSync, readdirSync } from 'node:fs'
import { request, type IncomingMessage } from 'node:http'
import { join } from 'node:path'
import { brotliDecompressSync, gunzipSync } from 'node:zlib'
import { describe, expect, inject, it } from 'vitest'
import { Client, demo } from '../support/client'
import { scriptsOf, textOf } from '../support/scripts'
import { buildDir } from '../support/server'

const url = inject('url')
const isMapLibrary = (script: string) => textOf(script).includes('maplibregl-canvas')

/** As a browser asks: without a client that unpacks by itself. */
async function asked(path: string, accepts?: string): Promise<{ answer: IncomingMessage, body: Buffer }> {
  const answer = await new Promise<IncomingMessage>((done, fail) => request(url + path, { headers: accepts ? { 'accept-encoding': accepts } : {} }, done).on('error', fail).end())
  const parts: Buffer[] = []
  for await (const part of answer) parts.push(part as Buffer)
  return { answer, body: Buffer.concat(parts) }
}

describe('the scripts of a page', () => {
  it('hold neither the schemas of the contracts nor the map library, which one page alone asks for', async () => {
    const signIn = await new Client(url).send('GET', '/sign-in')
    const scripts = scriptsOf(signIn.text)
    expect(scripts.length).toBeGreaterThan(2)
    expect(scripts.some(script => textOf(script).includes('/api/v1/session'))).toBe(true)
    // A word of each that no minifier changes.
    expect(scripts.filter(script => textOf(script).includes('safeParse'))).toEqual([])
    expect(scripts.filter(isMapLibrary)).toEqual([])
  })

  it('of the map come with its words and buttons, and the library after them', async () => {
    const page = await (await demo(url, 'lead')).send('GET', '/map')
    expect(page.text).toContain('Northern ice dome')
    expect(page.text).toContain('Draw a region')
    const scripts = scriptsOf(page.text)
    expect(scripts.filter(isMapLibrary)).toEqual([])
    expect(page.text).not.toContain('rel="prefetch"')
  })
})

describe('what is sent', () => {
  const script = readdirSync(join(buildDir, 'public/_nuxt')).filter(name => name.endsWith('.js')).find(isMapLibrary)!
  const plain = readFileSync(join(buildDir, 'public/_nuxt', script))

  it.each([
    ['gzip, deflate, br, zstd', 'br', brotliDecompressSync],
    ['gzip', 'gzip', gunzipSync],
    ['br;q=0, gzip', 'gzip', gunzipSync],
    ['', undefined, (body: Buffer) => body],
  ] as const)('to a browser that takes “%s” is %s and the same script', async (accepts, encoding, unpack) => {
    const { answer, body } = await asked(`/_nuxt/${script}`, accepts)
    expect(answer.headers['content-encoding']).toBe(encoding)
    expect(answer.headers.vary).toMatch(/accept-encoding/i)
    expect(unpack(body).equals(plain)).toBe(true)
  })

  it('is packed once: the sensitivity fields are packed as they are', async () => {
    const { answer } = await asked('/earth/fields.bin', 'gzip, br')
    expect(answer.headers['content-encoding']).toBeUndefined()
  })
})
