import Papa from 'papaparse'
import { leastMean } from '#shared/figures/seaLevel/seaLevelFacts'
import type { Principal } from '#shared/permissions'
import { InputError } from '#shared/types/issue'
import type { SeaLevelAnswer, SeaLevelTask } from '../workers/seaLevel'
import { authorise } from './change'
import type { Context } from './context'
import { editionRow } from './editions'
import { canonicalJson, sha256Hex } from './hash'
import { latestOutline, regionRow } from './regions'
import { runInputOf, runResultOf, runRow } from './runs'

interface Question { feedback: boolean, stepDeg: number, at?: string }

/** Places typed as `lat,lon;lat,lon`, degrees. */
export function placesOf(text: string | undefined): [number, number][] {
  if (!text) return []
  return text.split(';').map((pair, i) => {
    const [lat, lon, more] = pair.split(',').map(Number)
    if (!Number.isFinite(lat) || !Number.isFinite(lon) || more !== undefined || Math.abs(lat!) > 90 || Math.abs(lon!) > 360) {
      throw new InputError(`Place ${i + 1} cannot be read.`, [{ path: 'at', code: 'place', value: pair.slice(0, 60), message: `Write places as latitude,longitude in degrees with a semicolon between them; “${pair.slice(0, 60)}” is none.` }])
    }
    return [lat!, lon!]
  })
}

const kept = new WeakMap<Context, Map<string, Promise<SeaLevelAnswer>>>()

async function solve(context: Context, loads: SeaLevelTask['loads'], { feedback, stepDeg, at }: Question): Promise<SeaLevelAnswer> {
  const task: SeaLevelTask = { loads, feedback, stepDeg, places: placesOf(at) }
  const cache = kept.get(context) ?? new Map<string, Promise<SeaLevelAnswer>>()
  kept.set(context, cache)
  const key = sha256Hex(canonicalJson(task))
  let answer = cache.get(key)
  if (!answer) {
    if (cache.size > 20) cache.clear()
    answer = context.jobs.compute<SeaLevelAnswer>('seaLevel', task)
    answer.catch(() => cache.delete(key))
    cache.set(key, answer)
  }
  return answer
}

/** Where the sea rises and falls for the trends of a run, mm per year. What is spread over all land evenly is left out. */
export async function seaLevelOfRun(context: Context, principal: Principal | null, id: string, question: Question) {
  const row = runRow(context, id)
  authorise(principal, 'run.read', { workspaceId: row.workspaceId })
  return seaLevelOfRow(context, row, question)
}

/** The same for a published run, for everybody: one question only, so that each edition is solved once. */
export async function seaLevelOfEdition(context: Context, slug: string, n: number) {
  return seaLevelOfRow(context, runRow(context, editionRow(context, slug, n).runId), { feedback: true, stepDeg: 2 })
}

async function seaLevelOfRow(context: Context, row: ReturnType<typeof runRow>, question: Question) {
  const geometry = new Map(runInputOf(row).regions.map(r => [r.key, { geometry: r.geometry, restTo: r.restTo ?? null }]))
  const loads = runResultOf(row).regions.flatMap((region) => {
    const source = geometry.get(region.keptFrom ?? region.key)!
    const place = region.takenFrom ? geometry.get(region.takenFrom)!.geometry : region.keptFrom ? source.restTo && geometry.get(source.restTo)!.geometry : source.geometry
    const massGt = region.massGtPerYear?.value ?? 0
    return place && massGt !== 0 ? [{ geometry: place, massGt }] : []
  })
  return { ...await solve(context, loads, question), unit: 'mm per year' as const, feedback: question.feedback }
}

/** The same for a hundred gigatonnes lost by a region, mm. */
export async function seaLevelOfRegion(context: Context, principal: Principal | null, id: string, question: Question) {
  const row = regionRow(context, id)
  authorise(principal, 'region.read', { workspaceId: row.workspaceId })
  const answer = await solve(context, [{ geometry: latestOutline(context, id).geometry, massGt: -100 }], question)
  return { ...answer, unit: 'mm per 100 Gt lost' as const, feedback: question.feedback }
}

export type SeaLevelView = Awaited<ReturnType<typeof seaLevelOfRun>> | Awaited<ReturnType<typeof seaLevelOfRegion>>

/** The grid as CSV: one row a node of the sea, both poles and 180° W left as they are. */
export function seaLevelCsv(view: SeaLevelView): string {
  const rows: Record<string, number | ''>[] = []
  const largest = view.seaLevelMm.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
  const mean = Math.abs(view.barystaticMm) > leastMean * largest ? view.barystaticMm : null
  view.latitudesDeg.forEach((latitude, i) => view.longitudesDeg.forEach((longitude, j) => {
    const at = i * view.longitudesDeg.length + j
    if (view.sea[at]! > 0) rows.push({ latitude_deg: latitude, longitude_deg: longitude, sea_fraction: view.sea[at]!, sea_level_mm: view.seaLevelMm[at]!, relative_to_mean: mean === null ? '' : view.seaLevelMm[at]! / mean })
  }))
  const head = `# Relative sea level, ${view.unit}; mean over the sea ${view.barystaticMm} mm; degree ${view.degree}, rotational feedback ${view.feedback ? 'on' : 'off'}. Calculated: elastic Earth, fixed shorelines.`
  return `${head}\n${Papa.unparse(rows, { newline: '\n' })}\n`
}
