import { readFileSync } from 'node:fs'
import { gunzipSync } from 'node:zlib'
import { demo } from '../support/client'
import { startServer } from '../support/server'
import { makeObserved } from '../support/world'
import { wavyOutline } from './outlines'
import { quickest, type Figure } from './measure'

/** The built server, over HTTP on the loopback. */
export async function run(): Promise<Figure[]> {
  const started = performance.now()
  const server = await startServer()
  const up = performance.now() - started
  try {
    const lead = await demo(server.url, 'lead')
    const { workspaceId, agencyId } = (await lead.get('sessionRead')).memberships[0]!
    const c04 = gunzipSync(readFileSync('tests/fixtures/eop14c04_1962_2022.txt.gz')).toString('latin1')
    const body = { regions: [{ id: 'a', geometry: wavyOutline(1000), massGt: -100 }], settings: {} }
    return [
      { name: 'server up on an empty folder, demo seeded', value: up, unit: 'ms' },
      { name: 'EOP 14 C04, 22 248 days sent, parsed and stored', value: await quickest(3, () => makeObserved(lead, { workspaceId, agencyId: agencyId! }, c04)), unit: 'ms', note: 'limit 1000 ms' },
      { name: 'evaluate of one outline of 1 000 vertices', value: await quickest(20, () => lead.get('evaluate', { body })), unit: 'ms' },
    ]
  }
  finally {
    await server.stop()
  }
}
