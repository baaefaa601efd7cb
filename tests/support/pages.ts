import { readdirSync } from 'node:fs'
import type { Client } from './client'
import { gridCsv, makeGrid } from './world'

/** Every page of the product as the router knows it, from the folder of pages: `/regions/[id]`. */
export function pageRoutes(): string[] {
  return readdirSync('app/pages', { recursive: true, encoding: 'utf8' }).filter(file => file.endsWith('.vue'))
    .map(file => `/${file.replace(/\.vue$/, '').replace(/(^|\/)index$/, '')}`.replace(/(?<=.)\/$/, '')).sort()
}

/** Who opens a page in the walk, and with what in place of its parameters. */
export interface PageVisit { as: 'nobody' | 'lead' | 'admin', path: string }

/** An address on the demo for each page; a page without one fails the walk. */
export async function pageVisits(lead: Client, admin: Client): Promise<Record<string, PageVisit>> {
  const workspace = (await lead.get('sessionRead')).memberships[0]!.workspaceId
  const params = { workspace }
  const region = (await lead.get('regionList', { params })).items[0]!.id
  const scenario = (await lead.get('scenarioList', { params })).items.find(s => s.latestRun)!
  const run = scenario.latestRun!.id
  const observed = (await lead.get('observedList', { params })).items[0]!.id
  const grid = await makeGrid(lead, { workspaceId: workspace, agencyId: '' }, gridCsv())
  const { slug, n } = (await lead.get('editionList', { params })).items.at(-1)!
  const { link } = await admin.get('memberInvite', { params, body: { email: 'walked@demo.example', role: 'reader', agencyId: null } })
  return {
    '/': { as: 'nobody', path: '/' },
    '/forgotten': { as: 'nobody', path: '/forgotten' },
    '/account': { as: 'lead', path: '/account' },
    '/sign-in': { as: 'nobody', path: '/sign-in' },
    '/signed-in': { as: 'lead', path: '/signed-in' },
    '/invitation/[token]': { as: 'nobody', path: new URL(link).pathname },
    '/method': { as: 'nobody', path: '/method' },
    '/validation': { as: 'nobody', path: '/validation' },
    '/p/[slug]': { as: 'nobody', path: `/p/${slug}` },
    '/p/[slug]/[n]': { as: 'nobody', path: `/p/${slug}/${n}` },
    '/map': { as: 'lead', path: '/map' },
    '/regions': { as: 'lead', path: '/regions' },
    '/regions/[id]': { as: 'lead', path: `/regions/${region}` },
    '/regions/[id]/series': { as: 'lead', path: `/regions/${region}/series` },
    '/regions/table': { as: 'lead', path: '/regions/table' },
    '/regions/[id]/fit': { as: 'lead', path: `/regions/${region}/fit?acceleration=true&alias=true` },
    '/regions/[id]/sea-level': { as: 'lead', path: `/regions/${region}/sea-level` },
    '/grids': { as: 'lead', path: '/grids' },
    '/grids/[id]': { as: 'lead', path: `/grids/${grid}?region=${region}` },
    '/observations': { as: 'lead', path: '/observations' },
    '/observations/[id]': { as: 'lead', path: `/observations/${observed}` },
    '/observations/[id]/reduction': { as: 'lead', path: `/observations/${observed}/reduction` },
    '/scenarios': { as: 'lead', path: '/scenarios' },
    '/scenarios/[id]': { as: 'lead', path: `/scenarios/${scenario.id}` },
    '/runs/[id]': { as: 'lead', path: `/runs/${run}` },
    '/runs/[id]/sea-level': { as: 'lead', path: `/runs/${run}/sea-level` },
    '/runs/[id]/attribution': { as: 'lead', path: `/runs/${run}/attribution` },
    '/publications': { as: 'lead', path: '/publications' },
    '/log': { as: 'lead', path: '/log' },
    '/people': { as: 'admin', path: '/people' },
  }
}
