import { join } from 'node:path'
import Database from 'better-sqlite3'
import { ulid } from 'ulid'
import type { ScenarioDraft } from '#shared/api/schemas'
import type { Polygon, RegionKind, Role } from '#shared/types/domain'
import { signIn, type Client } from './client'

/** Reads the running server's database beside it. */
export function withDatabase<T>(dataDir: string, use: (db: Database.Database) => T): T {
  const db = new Database(join(dataDir, 'counterpoise.db'))
  db.pragma('busy_timeout = 5000')
  try {
    return use(db)
  }
  finally {
    db.close()
  }
}

export interface Place { workspaceId: string, agencyId: string }

/** A workspace with one agency, which no route can make beside the first one. */
export function addWorkspace(dataDir: string, name: string): Place {
  const place = { workspaceId: ulid(), agencyId: ulid() }
  const at = new Date().toISOString()
  withDatabase(dataDir, (db) => {
    db.prepare('insert into workspace (id, name, invented, createdAt) values (?, ?, 0, ?)').run(place.workspaceId, name, at)
    db.prepare('insert into agency (id, workspaceId, name, createdAt) values (?, ?, ?, ?)').run(place.agencyId, place.workspaceId, `${name} office`, at)
  })
  return place
}

/** A person with the demo's password; with a role, a member of the workspace. Returns the ids. */
export function addPerson(dataDir: string, email: string, { operator = false, place, role }: { operator?: boolean, place?: Place, role?: Role } = {}) {
  const userId = ulid()
  const membershipId = ulid()
  const at = new Date().toISOString()
  withDatabase(dataDir, (db) => {
    const { passwordHash: hash } = db.prepare('select passwordHash from user where email = \'lead@demo.example\'').get() as { passwordHash: string }
    db.prepare('insert into user (id, email, name, passwordHash, operator, createdAt) values (?, ?, ?, ?, ?, ?)').run(userId, email, email.split('@')[0], hash, operator ? 1 : 0, at)
    if (place && role) db.prepare('insert into membership (id, workspaceId, userId, agencyId, role, revision, createdAt) values (?, ?, ?, ?, ?, 1, ?)').run(membershipId, place.workspaceId, userId, place.agencyId, role, at)
  })
  return { userId, membershipId }
}

/** Makes somebody and signs them in. */
export async function newcomer(url: string, dataDir: string, options: Parameters<typeof addPerson>[2]): Promise<Client> {
  const email = `${ulid().toLowerCase()}@test.example`
  addPerson(dataDir, email, options)
  return signIn(url, email)
}

/** A square of straight lon–lat edges about a place. */
export function square(lon: number, lat: number, half = 1): Polygon {
  const [w, e, s, n] = [lon - half, lon + half, lat - half, lat + half]
  return { type: 'Polygon', coordinates: [[[w, s], [e, s], [e, n], [w, n], [w, s]]] }
}

/** A monthly series in Gt over whole years from 2004 with a trend and a season. */
export function monthlyCsv(years: number, gtPerYear: number, annualGt = 5): string {
  const rows = Array.from({ length: years * 12 }, (_, i) => {
    const date = `${2004 + Math.floor(i / 12)}-${String(i % 12 + 1).padStart(2, '0')}-15`
    return `${date},${(gtPerYear * (i + 0.5) / 12 + annualGt * Math.cos(2 * Math.PI * i / 12)).toFixed(3)},2.0`
  })
  return `date,mass (Gt),sigma (Gt)\n${rows.join('\n')}\n`
}

/** A short daily Earth orientation in the columns that are recognised by name. */
export function orientationCsv(days: number): string {
  const rows = Array.from({ length: days }, (_, i) => `${53005 + i},${(60 + 100 * Math.cos(i / 70)).toFixed(3)},${(330 - 100 * Math.sin(i / 70)).toFixed(3)},${(0.7 + 0.3 * Math.cos(i / 58)).toFixed(4)}`)
  return `mjd,x_mas,y_mas,lod_ms\n${rows.join('\n')}\n`
}

export const seriesFacts = { name: 'Test series', reason: 'first', source: 'made by the test', licence: '', independence: '' }

export async function makeRegion(client: Client, place: Place, kind: RegionKind, geometry: Polygon = square(20, 30)) {
  return client.get('regionCreate', { params: { workspace: place.workspaceId }, body: { name: `Region ${ulid().slice(-6)}`, kind, agencyId: place.agencyId, geometry } })
}

export async function makeVersion(client: Client, regionId: string, csv = monthlyCsv(4, -12)) {
  return client.get('seriesCreate', { params: { id: regionId }, body: { ...seriesFacts, columns: {} }, file: { name: 'mass.csv', content: csv } })
}

export async function makeObserved(client: Client, place: Place, content = orientationCsv(1500)) {
  return client.get('observedCreate', { params: { workspace: place.workspaceId }, body: { ...seriesFacts, name: 'Test orientation' }, file: { name: 'orientation.csv', content } })
}

export function draftOf(regions: ScenarioDraft['regions'], more: Partial<ScenarioDraft> = {}): ScenarioDraft {
  return {
    schemaVersion: 1,
    settings: { ocean: 'uniform', coefficients: 'gross-2007', core: 'decoupled', fromMjd: null, toMjd: null, maxGapDays: 62 },
    regions, background: [], restOfWorld: null, observedId: null, ...more,
  }
}

export async function makeScenario(client: Client, place: Place, regions: ScenarioDraft['regions'], more: Partial<ScenarioDraft> = {}) {
  return client.get('scenarioCreate', { params: { workspace: place.workspaceId }, body: { name: `Scenario ${ulid().slice(-6)}`, draft: draftOf(regions, more) } })
}

/** Runs a scenario and polls its job to the end. */
export async function runScenario(client: Client, scenario: { id: string, revision: number }) {
  const { id } = await client.get('runCreate', { params: { id: scenario.id }, body: { revision: scenario.revision } })
  return { jobId: id, runId: await endOfJob(client, id) }
}

/** Polls a job until it is done and gives its run. */
export async function endOfJob(client: Client, id: string): Promise<string> {
  return (await jobDone(client, id)).answer!.runId
}

/** A small world-wide grid as a table: cells of 5°, heights in m that fall by a centimetre a month unless told otherwise. */
export function gridCsv({ months = 4, height = (t: number, _lat: number, _lon: number) => -0.01 * t } = {}): string {
  const rows: string[] = []
  for (let t = 0; t < months; t++) {
    for (let lat = -87.5; lat < 90; lat += 5) for (let lon = -177.5; lon < 180; lon += 5) rows.push(`${lon},${lat},${2004 + Math.floor(t / 12)}-${String(t % 12 + 1).padStart(2, '0')},${height(t, lat, lon)}`)
  }
  return `lon,lat,month,height (m)\n${rows.join('\n')}\n`
}

/** Sends a grid and waits until it is read. */
export async function makeGrid(client: Client, place: Place, content: string | Uint8Array, name = 'grid.csv'): Promise<string> {
  const { id } = await client.get('gridCreate', { params: { workspace: place.workspaceId }, body: { name: 'Test grid' }, file: { name, content } })
  return (await jobDone(client, id)).gridId!
}

/** Polls a job until it is done. */
export async function jobDone(client: Client, id: string) {
  for (let i = 0; i < 200; i++) {
    const job = await client.get('jobRead', { params: { id } })
    if (job.state === 'done') return job
    if (job.state !== 'waiting' && job.state !== 'running') throw new Error(`the job ended as ${job.state}: ${JSON.stringify(job.problem)}`)
    await new Promise(wait => setTimeout(wait, 50))
  }
  throw new Error('the job did not end within 10 s')
}
