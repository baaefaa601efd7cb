import { writeFile, mkdir } from 'node:fs/promises'
import { join } from 'node:path'
import type { ScenarioDraft } from '#shared/api/schemas'
import type { ChainStep } from '#shared/observed/chainTypes'
import { defaultChain } from '#shared/observed/readChain'
import type { Principal } from '#shared/permissions'
import type { SeriesFacts } from '#shared/series/facts'
import type { RegionKind, Role } from '#shared/types/domain'
import { publishedBackground } from '#shared/text/background'
import { schema } from '../database/client'
import type { Upload } from '../utils/body'
import { createFluid } from './angularMomentum'
import { createChain } from './chains'
import { newId } from './change'
import type { Context } from './context'
import { demoFluidFields, demoFluidText, demoGravityCsv, demoGravityFields } from './demoFluids'
import { demoObservedCsv, demoRegions, demoSeriesCsv } from './demoData'
import { publish } from './editions'
import { createGravity } from './gravity'
import { secretToken, sha256Hex } from './hash'
import { createSeriesVersion } from './massSeries'
import { createObserved } from './observed'
import { addMembership, createWorkspace } from './people'
import { createRegion, seriesOfRegion } from './regions'
import { createScenario, freezeInput, scenarioRow } from './scenarios'
import { versionsOf } from './seriesStore'
import { principalOfUser } from './sessions'

const password = 'counterpoise-demo'
const people: { mailbox: string, name: string, role: Role, agency: 0 | 1 }[] = [
  { mailbox: 'admin', name: 'Ansa Vane', role: 'administrator', agency: 0 },
  { mailbox: 'lead', name: 'Maro Arden', role: 'lead', agency: 0 },
  { mailbox: 'hydrologist', name: 'Rusk Quillon', role: 'hydrologist', agency: 0 },
  { mailbox: 'glaciologist', name: 'Ilsa Tessen', role: 'glaciologist', agency: 1 },
  { mailbox: 'reader', name: 'Odo Larke', role: 'reader', agency: 1 },
]
const orientationSeed = 77
const noteOfInvention = 'Invented for the demonstration; made by a seeded generator.'

/**
 * Fills an empty database of a loopback instance with an invented account, through the same services that people use:
 * agencies, people, regions, series, an observed series, a scenario, its run and a published edition.
 */
export async function seedDemo(context: Context) {
  if (!context.demo) return
  if (context.db.select({ id: schema.user.id }).from(schema.user).limit(1).get()) {
    context.demo = Boolean(context.db.select({ invented: schema.workspace.invented }).from(schema.workspace).all().some(w => w.invented))
    return
  }
  const { workspaceId, agencies, principals } = await seedPeople(context)
  const scenarioId = await seedAccount(context, workspaceId, agencies, principals)
  const lead = principals.get('lead')!
  const runId = await context.jobs.runNow(lead, workspaceId, { scenarioId, name: scenarioRow(context, scenarioId).name, input: freezeInput(context, scenarioRow(context, scenarioId)) })
  const observedId = (JSON.parse(scenarioRow(context, scenarioId).draft) as ScenarioDraft).observedId
  await publish(context, lead, runId, { slug: 'halcyon-2004-2024', title: 'Six regions of the Halcyon Compact, 2004–2024', licence: 'CC BY 4.0. Invented data.', observedId, zonalTides: 'all' })
}

async function seedPeople(context: Context) {
  const passwordHash = await context.passwords.hash(password)
  return context.db.transaction((tx) => {
    const { workspaceId, agencyId } = createWorkspace(context, tx, { name: 'Halcyon Compact', agencyName: 'Halcyon Water Office', invented: true })
    const second = newId()
    tx.insert(schema.agency).values({ id: second, workspaceId, name: 'Skerry Ice Survey', createdAt: context.now() }).run()
    const agencies = [agencyId, second] as const
    const principals = new Map<string, Principal>()
    const users = people.map((person) => {
      const user = { id: newId(), email: `${person.mailbox}@demo.example`, name: person.name, passwordHash, operator: person.mailbox === 'admin', createdAt: context.now() }
      tx.insert(schema.user).values(user).run()
      addMembership(context, tx, { workspaceId, agencyId: agencies[person.agency], userId: user.id, role: person.role })
      return { person, user }
    })
    for (const { person, user } of users) {
      principals.set(person.mailbox, { ...principalOfUser(context, user), memberships: [{ workspaceId, agencyId: agencies[person.agency], role: person.role }] })
    }
    return { workspaceId, agencies, principals }
  })
}

async function seedAccount(context: Context, workspaceId: string, agencies: readonly [string, string], principals: Map<string, Principal>) {
  const choices: ScenarioDraft['regions'] = []
  for (const [i, demo] of demoRegions.entries()) {
    const ice = demo.kind === 'ice-sector' || demo.kind === 'glacier-region'
    const who = principals.get(ice ? 'glaciologist' : 'hydrologist')!
    const region = createRegion(context, who, workspaceId, { name: demo.name, kind: demo.kind, agencyId: agencies[ice ? 1 : 0], note: noteOfInvention, geometry: { type: 'Polygon', coordinates: [demo.ring] } })
    const csv = demoSeriesCsv(demo, 1000 + i)
    await createSeriesVersion(context, who, region.id, await asUpload(context, csv, `${demo.name.toLowerCase().replaceAll(' ', '-')}.csv`), {
      name: demo.name, reason: 'First version', source: noteOfInvention, licence: 'CC BY 4.0', independence: 'Invented; independent of gravimetry and of the pole.', facts: factsOfDemo(demo.kind),
      columns: {}, conversion: null, decisions: [], leaveOutBadRows: false, sharedRates: demo.sharedRates,
    })
    choices.push({ regionId: region.id, versionId: versionsOf(context, seriesOfRegion(context, region.id)!.id)[0]!.id, scale: 1 })
  }
  const lead = principals.get('lead')!
  await seedReductions(context, lead, workspaceId)
  const observed = await createObserved(context, lead, workspaceId, await asUpload(context, demoObservedCsv(orientationSeed), 'synthetic-orientation.csv'), {
    name: 'Synthetic Earth orientation 2004–2024', reason: 'First version', source: 'Synthetic: made by a seeded generator, no observation.', licence: 'CC BY 4.0', independence: 'Synthetic', leaveOutBadRows: false,
  })
  const scenario = createScenario(context, lead, workspaceId, {
    name: 'All regions, 2004–2024',
    draft: {
      schemaVersion: 1,
      settings: { ocean: context.earth.defaultOcean, coefficients: 'gross-2007', core: 'decoupled', fromMjd: null, toMjd: null, maxGapDays: 62 },
      regions: choices, background: publishedBackground.map(row => ({ ...row })), restOfWorld: null, observedId: observed.id,
    },
  })
  return scenario.id
}

/** Air, sea and gravity coefficients that belong to the synthetic orientation, and a chain under a name that takes air and sea out. */
async function seedReductions(context: Context, lead: Principal, workspaceId: string) {
  const facts = { source: noteOfInvention, licence: 'CC BY 4.0', leaveOutBadRows: false }
  const fluids: ChainStep[] = []
  for (const [i, component] of (['atmosphere', 'ocean'] as const).entries()) {
    const name = component === 'atmosphere' ? 'Invented air' : 'Invented sea'
    const { id } = await createFluid(context, lead, workspaceId, await asUpload(context, demoFluidText(component, orientationSeed, 200 + i), `invented-${component}.txt`), { ...facts, name, fields: demoFluidFields[component] })
    fluids.push({ kind: 'angular-momentum', on: true, correction: id, mass: true, motion: true, trend: false })
  }
  await createGravity(context, lead, workspaceId, await asUpload(context, demoGravityCsv(300), 'invented-degree-2.csv'), {
    ...facts, name: 'Invented gravity coefficients 2004–2024', independence: 'Invented', fields: demoGravityFields,
  })
  const usual = defaultChain()
  const chain = { ...usual, steps: usual.steps.flatMap(step => step.kind === 'excitation' ? [step, ...fluids] : [step]) }
  createChain(context, lead, workspaceId, { name: 'Tides, air and sea out', chain: { ...chain } })
}

/** Fields of an invented series: what a region of its kind holds. */
function factsOfDemo(kind: RegionKind): SeriesFacts {
  const contains = ({ 'aquifer': ['groundwater'], 'reservoir': ['surface-water'], 'lake': ['surface-water'], 'basin': ['groundwater', 'soil-water', 'snow'], 'soil-water': ['soil-water'], 'snow-water': ['snow'], 'ice-sector': ['ice'], 'glacier-region': ['ice'] } as const)[kind]
  return { citation: '', method: 'Seeded generator: trend, season and noise', instrument: 'none', contains: [...contains], gravimetry: 'no', pole: 'no', lengthOfDay: 'no' }
}

async function asUpload(context: Context, text: string, name: string): Promise<Upload> {
  const folder = join(context.dataDir, 'incoming')
  await mkdir(folder, { recursive: true })
  const path = join(folder, `seed-${secretToken()}`)
  await writeFile(path, text)
  return { path, name, type: 'text/csv', bytes: Buffer.byteLength(text), sha256: sha256Hex(text) }
}
