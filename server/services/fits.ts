import type { FitQuery } from '#shared/api/fitSchemas'
import { mjdFromIsoDate } from '#shared/earth/time/epochs'
import type { Principal } from '#shared/permissions'
import { ALIAS_DAYS, type FitSettings, type SeriesFit } from '#shared/series/fit/fitSeries'
import { InputError, type Issue } from '#shared/types/issue'
import { Problem } from '../utils/problem'
import type { FitTask } from '../workers/fit'
import type { WorkerAnswer } from '../workers/parts/answer'
import { authorise } from './change'
import type { Context } from './context'
import { regionRow, seriesOfRegion } from './regions'
import { massSeries, versionRow, versionsOf, versionView } from './seriesStore'

/** Fit of one version of a region's series with the terms that are asked for; stores nothing. */
export async function fitOfRegion(context: Context, principal: Principal | null, id: string, query: FitQuery) {
  const row = regionRow(context, id)
  authorise(principal, 'region.read', { workspaceId: row.workspaceId })
  const series = seriesOfRegion(context, id)
  const version = query.version ? versionRow(context, query.version) : series ? versionsOf(context, series.id)[0] : undefined
  if (!series || !version || version.seriesId !== series.id) throw new Problem(404, 'not-found', 'This region has no mass series yet.')
  const settings = settingsOf(query)
  const { mjd, massGt, sigmaGt } = massSeries(context, version.id)
  const answer = await context.jobs.compute<WorkerAnswer<SeriesFit>>('fit', { series: { mjd, massGt, sigmaGt }, settings } satisfies FitTask)
  if ('fault' in answer) throw new InputError(answer.fault.message, answer.fault.issues, answer.fault.status)
  return { version: versionView(context, version), settings, ...answer.result }
}

function settingsOf({ acceleration, annual, semiannual, alias, step, from, to, maxGap }: FitQuery): FitSettings {
  const issues: Issue[] = []
  const day = (path: string, text: string | undefined): number | null => {
    if (!text) return null
    try {
      return mjdFromIsoDate(text)
    }
    catch {
      issues.push({ path, code: 'date', value: text, message: 'is not a day of the calendar' })
      return null
    }
  }
  const [fromMjd, toMjd] = [day('from', from), day('to', to)]
  if (fromMjd !== null && toMjd !== null && fromMjd >= toMjd) issues.push({ path: 'to', code: 'order', message: 'must be later than the first day' })
  const stepsMjd = (step?.split(',') ?? []).flatMap((text, i) => day(`step/${i}`, text) ?? [])
  if (issues.length) throw new InputError('The fit cannot be made as asked.', issues)
  return { acceleration, annual, semiannual, aliasDays: alias ? ALIAS_DAYS : null, stepsMjd, fromMjd, toMjd, maxGapDays: maxGap }
}
