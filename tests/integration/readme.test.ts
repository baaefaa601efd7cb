import { readFileSync } from 'node:fs'
import { expect, inject, it } from 'vitest'
import { Client } from '../support/client'

it('the README’s requests answer with the figures that it states', async () => {
  const readme = readFileSync('README.md', 'utf8')
  const requests = [...readme.matchAll(/localhost:3000(\/api\/v1\/[\w/-]+)[^']*-d '(\{[^']*\})'/g)].map(([, path, body]) => ({ path: path!, body: JSON.parse(body!) as { settings?: { ocean: string } } }))
  expect(requests.map(r => r.path)).toEqual(['/api/v1/session', '/api/v1/evaluate'])
  const client = new Client(inject('url'))
  await client.send('POST', requests[0]!.path, { body: requests[0]!.body })
  const { total } = (await client.send('POST', requests[1]!.path, { body: requests[1]!.body })).json as { total: { lodMicroseconds: number, poleShiftMm: number } }

  const [, lod, shift] = /answers `lodMicroseconds` (\d+\.\d+) and `poleShiftMm` (\d+\.\d+)/.exec(readme)!
  const digits = (text: string) => text.split('.')[1]?.length ?? 0
  expect(total.lodMicroseconds.toFixed(digits(lod!))).toBe(lod)
  expect(total.poleShiftMm.toFixed(digits(shift!))).toBe(shift)
  const alone = (await client.send('POST', requests[1]!.path, { body: { ...requests[1]!.body, settings: { ocean: 'none' } } })).json as { total: { lodMicroseconds: number } }
  // “wrong by a factor of twelve”
  expect(Math.round(alone.total.lodMicroseconds / total.lodMicroseconds)).toBe(12)
})
