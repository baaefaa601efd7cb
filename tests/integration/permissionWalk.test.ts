import { createHash } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { ulid } from 'ulid'
import { beforeAll, describe, expect, inject, it } from 'vitest'
import { contracts, type ContractId } from '#shared/api/contracts'
import { Client, demoPassword, signIn } from '../support/client'
import { buildDir } from '../support/server'
import {
  addPerson, addWorkspace, draftOf, gridCsv, jobDone, makeGrid, makeObserved, makeRegion, makeScenario, makeVersion, monthlyCsv, newcomer, orientationCsv, runScenario, seriesFacts, square, withDatabase, type Place,
} from '../support/world'

// Every built route, called as everybody. What must come out is written here from the table in the product's architecture
// (“Who may what”), not taken from shared/permissions.ts, so that the two can differ.

const url = inject('url')
const dataDir = inject('dataDir')

const everybody = ['operator', 'administrator', 'lead', 'hydrologist', 'glaciologist', 'reader', 'nobody', 'foreign lead'] as const
type Who = typeof everybody[number]

/** In the order of `everybody`; “yes” is the contract's own status. The operator is no member of the workspace. */
const rules = {
  open: 'yes yes yes yes yes yes yes yes',
  signedIn: 'yes yes yes yes yes yes 401 yes',
  nobodyElse: '404 404 404 404 404 404 401 404',
  members: '404 yes yes yes yes yes 401 404',
  people: '404 yes 403 403 403 403 401 404',
  changeLog: '404 yes yes 403 403 403 401 404',
  science: '404 403 yes yes yes yes 401 404',
  liquid: '404 403 yes yes 403 403 401 404',
  ice: '404 403 yes 403 yes 403 401 404',
  anyKind: '404 403 yes yes yes 403 401 404',
  leadOnly: '404 403 yes 403 403 403 401 404',
  ownRow: '404 403 yes yes yes 403 401 404',
  othersRow: '404 403 yes 403 403 403 401 404',
  export: '404 yes yes yes yes yes 401 404',
}

interface Made { params?: Record<string, string | number>, query?: Record<string, string | number>, body?: unknown, file?: { name: string, content: string } }
interface Step { route: ContractId, rule: keyof typeof rules, case?: string, make: (who: Who) => Made | Promise<Made>, fresh?: boolean }

let place: Place
const clients = {} as Record<Who, Client>
const emails = {} as Record<Who, string>
let lead: Client
let shared: { liquid: string, ice: string, version: string, observed: string, scenario: string, runId: string, jobId: string, slug: string, grid: string, regions: { regionId: string, versionId: string, scale: number }[] }

beforeAll(async () => {
  place = addWorkspace(dataDir, 'Walk')
  const foreign = addWorkspace(dataDir, 'Elsewhere')
  for (const who of everybody) {
    emails[who] = `${who.replace(' ', '-')}@walk.example`
    if (who === 'operator') addPerson(dataDir, emails[who], { operator: true })
    else if (who === 'foreign lead') addPerson(dataDir, emails[who], { place: foreign, role: 'lead' })
    else if (who !== 'nobody') addPerson(dataDir, emails[who], { place, role: who })
    clients[who] = who === 'nobody' ? new Client(url) : await signIn(url, emails[who])
  }
  lead = clients.lead
  const liquid = await makeRegion(lead, place, 'aquifer')
  const ice = await makeRegion(lead, place, 'ice-sector', square(-40, 72))
  const version = await makeVersion(lead, liquid.id)
  const regions = [{ regionId: liquid.id, versionId: version.id, scale: 1 }]
  const observed = await makeObserved(lead, place)
  const scenario = await makeScenario(lead, place, regions)
  const { runId, jobId } = await runScenario(lead, scenario)
  const slug = `walk-${ulid().toLowerCase()}`
  await lead.get('editionCreate', { params: { id: runId }, body: { slug, title: 'Walk', licence: 'CC BY 4.0', observedId: null } })
  shared = { liquid: liquid.id, ice: ice.id, version: version.id, observed: observed.id, scenario: scenario.id, runId, jobId, slug, regions, grid: await makeGrid(lead, place, gridCsv()) }
})

const workspace = () => ({ workspace: place.workspaceId })
const freshRegion = async (kind: 'lake' | 'glacier-region') => (await makeRegion(lead, place, kind)).id
const freshMember = () => addPerson(dataDir, `${ulid().toLowerCase()}@walk.example`, { place, role: 'reader' }).membershipId
/** A row of the person's own where they may make one, else of the lead's. */
const maker = (who: Who) => who === 'hydrologist' || who === 'glaciologist' ? clients[who] : lead
const freshScenario = (client: Client) => makeScenario(client, place, shared.regions)
async function freshInvitation() {
  const { link } = await clients.administrator.get('memberInvite', { params: workspace(), body: { email: `${ulid().toLowerCase()}@walk.example`, role: 'reader', agencyId: null } })
  return link.split('/').at(-1)!
}
const freshToken = async (client: Client) => (await client.get('tokenCreate', { body: { name: 'walk', scope: 'read', days: 1 } })).id
async function freshEdition() {
  const slug = `walk-${ulid().toLowerCase()}`
  await lead.get('editionCreate', { params: { id: shared.runId }, body: { slug, title: 'Walk', licence: '', observedId: null } })
  return { slug, n: 1 }
}

const newRegion = (kind: string) => () => ({ params: workspace(), body: { name: 'Walked', kind, agencyId: place.agencyId, geometry: square(10, 10) } })
const newRegions = (kind: string) => () => ({ params: workspace(), body: { agencyId: place.agencyId, regions: [{ name: 'Walked', kind, geometry: square(10, 10) }] } })
const newSeries = (id: string) => ({ params: { id }, body: { ...seriesFacts, columns: {} }, file: { name: 'mass.csv', content: monthlyCsv(3, -2) } })
const newTable = (regionId: string) => ({ params: { workspace: place.workspaceId }, body: { ...seriesFacts, columns: {}, series: [{ regionId, valueColumn: 1, sigmaColumn: 2 }] }, file: { name: 'mass.csv', content: monthlyCsv(3, -2) } })
async function binned(kind: 'lake' | 'glacier-region') {
  const id = await freshRegion(kind)
  const { revision } = await lead.get('regionRemove', { params: { id }, query: { revision: 1 } })
  return { params: { id }, body: { revision } }
}
async function binnedScenario(client: Client) {
  const { id } = await freshScenario(client)
  return { params: { id }, body: await client.get('scenarioRemove', { params: { id }, query: { revision: 1 } }) }
}

async function takenSeries() {
  const { id } = await lead.get('gridSeries', { params: { id: shared.grid }, body: { regionIds: [shared.liquid], variable: 'height', sea: 'none' } })
  await jobDone(lead, id)
  return id
}

const noSteps = { schemaVersion: 1, from: null, to: null, includePredictions: false, steps: [] }
const freshChain = () => lead.get('chainCreate', { params: workspace(), body: { name: ulid(), chain: noSteps } })

const steps: Step[] = [
  { route: 'sessionRead', rule: 'open', make: () => ({}) },
  { route: 'sessionCreate', rule: 'open', fresh: true, make: who => ({ body: { email: who === 'nobody' ? emails.reader : emails[who], password: demoPassword } }) },
  { route: 'sessionDelete', rule: 'open', fresh: true, make: () => ({}) },
  { route: 'invitationRead', rule: 'open', make: async () => ({ params: { token: await freshInvitation() } }) },
  { route: 'invitationAccept', rule: 'open', fresh: true, make: async () => ({ params: { token: await freshInvitation() }, body: { name: 'New', password: 'a long enough one' } }) },
  { route: 'passwordForgotten', rule: 'open', make: () => ({ body: { email: 'nobody-known@walk.example' } }) },
  { route: 'passwordChange', rule: 'signedIn', make: who => ({ body: { current: demoPassword, password: who === 'nobody' ? 'a long enough one' : demoPassword } }) },
  { route: 'tokenList', rule: 'signedIn', make: () => ({}) },
  { route: 'tokenCreate', rule: 'signedIn', make: () => ({ body: { name: 'walk', scope: 'read', days: 1 } }) },
  { route: 'tokenRevoke', case: 'own', rule: 'signedIn', make: async who => ({ params: { id: who === 'nobody' ? ulid() : await freshToken(clients[who]) } }) },
  { route: 'tokenRevoke', case: 'of another', rule: 'nobodyElse', make: async who => ({ params: { id: await freshToken(who === 'lead' ? clients.reader : lead) } }) },
  { route: 'invitationList', rule: 'people', make: () => ({ params: workspace() }) },
  { route: 'invitationWithdraw', rule: 'people', make: async () => ({ params: { ...workspace(), id: createHash('sha256').update(await freshInvitation()).digest('hex') } }) },
  { route: 'memberPasswordLink', rule: 'people', make: () => ({ params: { id: freshMember() } }) },
  { route: 'memberList', rule: 'people', make: () => ({ params: workspace() }) },
  { route: 'memberInvite', rule: 'people', make: () => ({ params: workspace(), body: { email: `${ulid()}@walk.example`, role: 'reader', agencyId: null } }) },
  { route: 'memberChange', rule: 'people', make: () => ({ params: { id: freshMember() }, body: { revision: 1, role: 'lead', agencyId: null } }) },
  { route: 'memberRemove', rule: 'people', make: () => ({ params: { id: freshMember() }, query: { revision: 1 } }) },
  { route: 'agencyList', rule: 'members', make: () => ({ params: workspace() }) },
  { route: 'agencyCreate', rule: 'people', make: () => ({ params: workspace(), body: { name: 'Another office' } }) },
  { route: 'logList', rule: 'changeLog', make: () => ({ params: workspace() }) },

  { route: 'evaluate', rule: 'signedIn', make: () => ({ body: { regions: [{ id: 'a', geometry: square(0, 0), massGt: 1 }], settings: { ocean: 'uniform' } } }) },

  { route: 'observedReduce', rule: 'signedIn', make: () => ({ body: {}, file: { name: 'eop.csv', content: orientationCsv(800) } }) },

  { route: 'regionList', rule: 'science', make: () => ({ params: workspace() }) },
  { route: 'regionCreate', case: 'liquid water', rule: 'liquid', make: newRegion('soil-water') },
  { route: 'regionCreate', case: 'ice', rule: 'ice', make: newRegion('ice-sector') },
  { route: 'regionRead', case: 'liquid water', rule: 'science', make: () => ({ params: { id: shared.liquid } }) },
  { route: 'regionRead', case: 'ice', rule: 'science', make: () => ({ params: { id: shared.ice } }) },
  { route: 'regionChange', case: 'liquid water', rule: 'liquid', make: async () => ({ params: { id: await freshRegion('lake') }, body: { revision: 1, name: 'Renamed' } }) },
  { route: 'regionChange', case: 'ice', rule: 'ice', make: async () => ({ params: { id: await freshRegion('glacier-region') }, body: { revision: 1, name: 'Renamed' } }) },
  { route: 'regionChange', case: 'from liquid water to ice', rule: 'leadOnly', make: async () => ({ params: { id: await freshRegion('lake') }, body: { revision: 1, kind: 'ice-sector' } }) },
  { route: 'regionRemove', case: 'liquid water', rule: 'liquid', make: async () => ({ params: { id: await freshRegion('lake') }, query: { revision: 1 } }) },
  { route: 'regionRemove', case: 'ice', rule: 'ice', make: async () => ({ params: { id: await freshRegion('glacier-region') }, query: { revision: 1 } }) },
  { route: 'regionRestore', case: 'liquid water', rule: 'liquid', make: () => binned('lake') },
  { route: 'regionRestore', case: 'ice', rule: 'ice', make: () => binned('glacier-region') },
  { route: 'regionCreateMany', case: 'liquid water', rule: 'liquid', make: newRegions('soil-water') },
  { route: 'regionCreateMany', case: 'ice', rule: 'ice', make: newRegions('ice-sector') },
  { route: 'regionRemoveMany', case: 'liquid water', rule: 'liquid', make: async () => ({ params: workspace(), body: { regions: [{ id: await freshRegion('lake'), revision: 1 }] } }) },
  { route: 'regionRemoveMany', case: 'ice', rule: 'ice', make: async () => ({ params: workspace(), body: { regions: [{ id: await freshRegion('glacier-region'), revision: 1 }] } }) },
  { route: 'regionMonths', rule: 'science', make: () => ({ params: workspace() }) },
  { route: 'regionTotal', rule: 'science', make: () => ({ params: workspace() }) },
  { route: 'errorSourceList', rule: 'science', make: () => ({ params: workspace() }) },
  { route: 'regionPrediction', rule: 'science', make: () => ({ params: { id: shared.liquid } }) },
  { route: 'regionFit', rule: 'science', make: () => ({ params: { id: shared.liquid } }) },
  { route: 'seriesCreate', case: 'liquid water', rule: 'liquid', make: async () => newSeries(await freshRegion('lake')) },
  { route: 'seriesTableCreate', case: 'liquid water', rule: 'liquid', make: async () => newTable(await freshRegion('lake')) },
  { route: 'seriesTableCreate', case: 'ice', rule: 'ice', make: async () => newTable(await freshRegion('glacier-region')) },
  { route: 'seriesCreate', case: 'ice', rule: 'ice', make: async () => newSeries(await freshRegion('glacier-region')) },
  { route: 'seriesVersionList', rule: 'science', make: () => ({ params: workspace() }) },
  { route: 'seriesVersionRead', rule: 'science', make: () => ({ params: { id: shared.version } }) },
  { route: 'originalRead', rule: 'science', make: () => ({ params: { id: shared.version } }) },

  { route: 'gridList', rule: 'science', make: () => ({ params: workspace() }) },
  { route: 'gridCreate', rule: 'anyKind', make: () => ({ params: workspace(), body: { name: 'Walked' }, file: { name: 'grid.csv', content: gridCsv() } }) },
  { route: 'gridRead', rule: 'science', make: () => ({ params: { id: shared.grid } }) },
  { route: 'gridMonth', rule: 'science', make: () => ({ params: { id: shared.grid, n: 0 } }) },
  { route: 'gridSeries', case: 'liquid water', rule: 'liquid', make: () => ({ params: { id: shared.grid }, body: { regionIds: [shared.liquid], variable: 'height', sea: 'none' } }) },
  { route: 'gridSeries', case: 'ice', rule: 'ice', make: () => ({ params: { id: shared.grid }, body: { regionIds: [shared.ice], variable: 'height', sea: 'none' } }) },
  { route: 'gridSeriesRead', rule: 'science', make: async () => ({ params: { id: await takenSeries() } }) },
  { route: 'gridSeriesAccept', rule: 'liquid', make: async () => ({ params: { id: await takenSeries() }, body: { name: 'Walked', source: 'made by the test', product: null } }) },
  { route: 'gridRemove', rule: 'anyKind', make: async () => ({ params: { id: await makeGrid(lead, place, gridCsv()) }, query: { revision: 1 } }) },
  {
    route: 'gridRestore', rule: 'anyKind',
    make: async () => {
      const id = await makeGrid(lead, place, gridCsv())
      return { params: { id }, body: await lead.get('gridRemove', { params: { id }, query: { revision: 1 } }) }
    },
  },

  { route: 'observedList', rule: 'science', make: () => ({ params: workspace() }) },
  { route: 'observedCreate', rule: 'leadOnly', make: () => ({ params: workspace(), body: { ...seriesFacts }, file: { name: 'eop.csv', content: orientationCsv(40) } }) },
  { route: 'observedRead', rule: 'science', make: () => ({ params: { id: shared.observed } }) },
  { route: 'fluidList', rule: 'science', make: () => ({ params: workspace() }) },
  {
    route: 'fluidCreate', rule: 'leadOnly',
    make: () => ({
      params: workspace(), file: { name: 'aam.txt', content: '2010 1 1 0 55197.0 1e-7 2e-7 3e-9 4e-9 5e-9 6e-9\n2010 1 2 0 55198.0 1e-7 2e-7 3e-9 4e-9 5e-9 6e-9\n' },
      body: { name: 'Air', source: 'made by the test', fields: { component: 'atmosphere', model: 'invented', pairedWith: null, invertedBarometer: 'yes', coefficients: 'gross-2007', subtracted: '', barystatic: 'no' } },
    }),
  },
  {
    route: 'gravityCreate', rule: 'leadOnly',
    make: () => ({
      params: workspace(), file: { name: 'degree2.csv', content: 'mjd,dC20,dC21,dS21\n55200,1e-11,2e-12,-3e-12\n55230,2e-11,2.5e-12,-3.5e-12\n' },
      body: { name: 'Gravity', source: 'made by the test', fields: { solidPoleTide: 'removed', oceanPoleTide: 'removed', permanentTide: 'zero-tide', meanPole: 'secular-2018', radiusM: 6378136.3, dealiasing: 'restored', axialLoadFactor: 0.695 } },
    }),
  },
  { route: 'chainList', rule: 'science', make: () => ({ params: workspace() }) },
  { route: 'chainCreate', rule: 'leadOnly', make: () => ({ params: workspace(), body: { name: ulid(), chain: noSteps } }) },
  { route: 'chainChange', rule: 'leadOnly', make: async () => ({ params: { id: (await freshChain()).id }, body: { revision: 1, name: ulid() } }) },
  { route: 'chainRemove', rule: 'leadOnly', make: async () => ({ params: { id: (await freshChain()).id }, query: { revision: 1 } }) },
  {
    route: 'chainRestore', rule: 'leadOnly',
    make: async () => {
      const { id } = await freshChain()
      return { params: { id }, body: await lead.get('chainRemove', { params: { id }, query: { revision: 1 } }) }
    },
  },
  { route: 'observedChain', rule: 'science', make: () => ({ params: { id: shared.observed }, query: { points: 50 } }) },
  { route: 'observedRemove', rule: 'leadOnly', make: async () => ({ params: { id: (await makeObserved(lead, place, orientationCsv(40))).id }, query: { revision: 1 } }) },
  {
    route: 'observedRestore', rule: 'leadOnly',
    make: async () => {
      const { id } = await makeObserved(lead, place, orientationCsv(40))
      return { params: { id }, body: await lead.get('observedRemove', { params: { id }, query: { revision: 1 } }) }
    },
  },

  { route: 'scenarioList', rule: 'science', make: () => ({ params: workspace() }) },
  { route: 'scenarioCreate', rule: 'anyKind', make: () => ({ params: workspace(), body: { name: 'Walked', draft: draftOf(shared.regions) } }) },
  { route: 'scenarioRead', rule: 'science', make: () => ({ params: { id: shared.scenario } }) },
  { route: 'scenarioChange', case: 'own', rule: 'ownRow', make: async who => ({ params: { id: (await freshScenario(maker(who))).id }, body: { revision: 1, name: 'Renamed' } }) },
  { route: 'scenarioChange', case: 'of another', rule: 'othersRow', make: async () => ({ params: { id: (await freshScenario(lead)).id }, body: { revision: 1, name: 'Renamed' } }) },
  { route: 'scenarioRemove', case: 'own', rule: 'ownRow', make: async who => ({ params: { id: (await freshScenario(maker(who))).id }, query: { revision: 1 } }) },
  { route: 'scenarioRemove', case: 'of another', rule: 'othersRow', make: async () => ({ params: { id: (await freshScenario(lead)).id }, query: { revision: 1 } }) },
  { route: 'scenarioRestore', case: 'own', rule: 'ownRow', make: who => binnedScenario(maker(who)) },
  { route: 'scenarioRestore', case: 'of another', rule: 'othersRow', make: () => binnedScenario(lead) },
  { route: 'runCreate', case: 'own', rule: 'ownRow', make: async who => ({ params: { id: (await freshScenario(maker(who))).id }, body: { revision: 1 } }) },
  { route: 'runCreate', case: 'of another', rule: 'othersRow', make: async () => ({ params: { id: shared.scenario }, body: { revision: 1 } }) },
  { route: 'jobRead', rule: 'science', make: () => ({ params: { id: shared.jobId } }) },
  { route: 'jobEvents', rule: 'science', make: () => ({ params: { id: shared.jobId } }) },
  { route: 'jobCancel', case: 'own', rule: 'ownRow', make: async who => ({ params: { id: (await runScenario(maker(who), await freshScenario(maker(who)))).jobId } }) },
  { route: 'jobCancel', case: 'of another', rule: 'othersRow', make: () => ({ params: { id: shared.jobId } }) },
  { route: 'runRead', rule: 'science', make: () => ({ params: { id: shared.runId } }) },
  { route: 'runComparison', rule: 'science', make: () => ({ params: { id: shared.runId }, query: { observed: shared.observed } }) },
  { route: 'runAttribution', rule: 'science', make: () => ({ params: { id: shared.runId }, query: { observed: shared.observed } }) },
  { route: 'runMonteCarlo', rule: 'anyKind', make: () => ({ params: { id: shared.runId }, body: { members: 100 } }) },
  { route: 'runMonteCarloRead', rule: 'science', make: () => ({ params: { id: shared.runId } }) },
  { route: 'runSeaLevel', rule: 'science', make: () => ({ params: { id: shared.runId }, query: { step: 5 } }) },
  { route: 'runSeaLevelCsv', rule: 'science', make: () => ({ params: { id: shared.runId }, query: { step: 5 } }) },
  { route: 'regionSeaLevel', rule: 'science', make: () => ({ params: { id: shared.liquid }, query: { step: 5 } }) },
  { route: 'regionSeaLevelCsv', rule: 'science', make: () => ({ params: { id: shared.liquid }, query: { step: 5 } }) },
  { route: 'runFile', rule: 'export', make: () => ({ params: { id: shared.runId, file: 'budget.csv' } }) },

  { route: 'editionList', rule: 'members', make: () => ({ params: workspace() }) },
  { route: 'editionCreate', rule: 'leadOnly', make: () => ({ params: { id: shared.runId }, body: { slug: `walk-${ulid().toLowerCase()}`, title: 'Walk', licence: '', observedId: null } }) },
  { route: 'editionWithdraw', rule: 'leadOnly', make: async () => ({ params: await freshEdition(), body: { reason: 'a walk' } }) },
  { route: 'editionIndex', rule: 'open', make: () => ({}) },
  { route: 'editionRead', rule: 'open', make: () => ({ params: { slug: shared.slug } }) },
  { route: 'editionSeaLevel', rule: 'open', make: () => ({ params: { slug: shared.slug, n: 1 } }) },
  { route: 'editionFile', rule: 'open', make: () => ({ params: { slug: shared.slug, n: 1, file: 'series.csv' } }) },
  { route: 'openapi', rule: 'open', make: () => ({}) },
  { route: 'health', rule: 'open', make: () => ({}) },
  { route: 'validationRead', rule: 'open', make: () => ({}) },
]

// What a refused call could have left: a log entry or a job. A run that was allowed before writes its entry when the worker is done, so that one does not count; the job that it came from does.
const lastLogEntry = () => withDatabase(dataDir, db => db.prepare('select coalesce(max(seq), 0) || \' \' || (select count(*) from job) from log where action <> \'run stored\'').pluck().get())

describe.each(steps.map(step => ({ ...step, title: step.case ? `${step.route}, ${step.case}` : step.route })))('$title', ({ route, rule, make, fresh }) => {
  it('answers each as the table says, and a refusal leaves no trace', async () => {
    const expected: Record<string, number> = {}
    const got: Record<string, number> = {}
    const traces: string[] = []
    for (const [i, who] of everybody.entries()) {
      const rule_ = rules[rule].split(' ')[i]!
      expected[who] = rule_ === 'yes' ? (contracts[route] as { status?: number }).status ?? 200 : Number(rule_)
      const client = !fresh ? clients[who] : who === 'nobody' ? new Client(url) : await signIn(url, emails[who])
      const call = await make(who)
      const before = lastLogEntry()
      const answer = await client.call(route, call)
      got[who] = answer.status
      // A run that was started writes to the log when its job ends: not while the next one is looked at.
      if (answer.status === 202) await jobDone(lead, (answer.json as { id: string }).id)
      if (got[who]! >= 400 && lastLogEntry() !== before) traces.push(who)
    }
    expect(got).toEqual(expected)
    expect(traces).toEqual([])
  })
})

describe('the table of built routes', () => {
  const table = JSON.parse(readFileSync(join(buildDir, 'server', 'runtime', 'routes.json'), 'utf8')) as { method: string, route: string }[]
  const built = table.map(({ method, route }) => `${method} ${route}`)
  const listed = Object.values(contracts).map(c => `${c.method} ${c.path.replace(/\{(\w+)\}/g, ':$1')}`)
  /** Not of the contracts list: the answer to whatever no route answers, Nuxt's own error page and islands, and the session module's own pair. */
  const apart = ['ALL /api/v1/**', 'ALL /__nuxt_error', 'ALL /__nuxt_island/**', 'GET /api/_auth/session', 'DELETE /api/_auth/session']

  it('is the contracts list, no more and no less', () => {
    expect([...built].sort()).toEqual([...listed, ...apart].sort())
  })

  it('was walked whole', () => {
    expect([...new Set(steps.map(s => s.route))].sort()).toEqual(Object.keys(contracts).sort())
  })
})

describe('routes apart from the list', () => {
  it.each(everybody)('the session module tells %s no secret and ends nothing for others', async (who) => {
    const client = who === 'nobody' ? new Client(url) : await signIn(url, emails[who])
    const read = await client.send('GET', '/api/_auth/session')
    expect(read.status).toBe(200)
    expect(read.text).not.toMatch(/token|secure|password|hash/i)
    expect((await client.send('DELETE', '/api/_auth/session')).status).toBe(200)
    expect((await clients[who].get('sessionRead')).user === null).toBe(who === 'nobody')
  })

  it.each(everybody)('an unknown route answers %s 404', async (who) => {
    for (const method of ['GET', 'POST', 'PUT', 'PATCH', 'DELETE']) {
      expect((await clients[who].send(method, '/api/v1/no-such-thing')).status).toBe(404)
    }
  })

  it('a workspace, a row and a link that do not exist answer 404 to those who may ask', async () => {
    const stranger = await newcomer(url, dataDir, { place, role: 'lead' })
    for (const [id, params] of [['regionRead', { id: ulid() }], ['scenarioRead', { id: ulid() }], ['runRead', { id: ulid() }], ['jobRead', { id: ulid() }], ['observedRead', { id: ulid() }], ['seriesVersionRead', { id: ulid() }], ['regionList', { workspace: ulid() }], ['regionRead', { id: 'not-an-id' }], ['editionRead', { slug: 'never-published' }]] as const) {
      await stranger.refused(id, 404, { params })
    }
  })
})
