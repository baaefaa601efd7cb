import { InputError } from '../types/issue.ts'
import type { Issue } from '../types/issue.ts'

/** Regions that get one factor together, with a prior of their own; null: the prior that all have. */
export interface ScalingGroup { name: string, regions: string[], prior: { mean: number, sigma: number } | null }

const MOST_GROUPS = 200

/**
 * Checks groups as they were sent: each names regions of the run that are switched on, no region stands in two of them, and a prior has a
 * mean and a positive one-sigma. Regions in none get a factor of their own.
 *
 * @throws InputError with one issue for each fault
 */
export function readGroups(json: unknown, regions: readonly { key: string, name: string }[]): ScalingGroup[] {
  const issues: Issue[] = []
  const fault = (path: string, code: string, message: string): void => {
    issues.push({ path, code, message })
  }
  const taken = new Set<string>()
  const list = Array.isArray(json) ? json as unknown[] : []
  if (!Array.isArray(json) || list.length > MOST_GROUPS) fault('groups', 'not-a-list', `“groups” must be a list of up to ${MOST_GROUPS} groups.`)
  const groups = list.flatMap((entry, i): ScalingGroup[] => {
    const path = `groups/${i}`
    const { name, regions: keys, prior = null } = (typeof entry === 'object' && entry !== null ? entry : {}) as Record<string, unknown>
    if (typeof name !== 'string' || name.trim() === '' || name.length > 120 || !Array.isArray(keys) || keys.length === 0) {
      fault(path, 'not-a-group', 'A group needs a name and the keys of its regions.')
      return []
    }
    for (const key of keys as unknown[]) {
      if (!regions.some(region => region.key === key)) fault(`${path}/regions`, 'unknown-region', `“${name}” holds “${String(key).slice(0, 60)}”, which is no region of the run that is switched on.`)
      else if (taken.has(key as string)) fault(`${path}/regions`, 'twice', `“${regions.find(region => region.key === key)!.name}” is in two groups.`)
      taken.add(String(key))
    }
    const given = prior as { mean?: unknown, sigma?: unknown } | null
    const holds = given === null || (typeof given === 'object' && typeof given.mean === 'number' && Math.abs(given.mean) <= 100 && typeof given.sigma === 'number' && given.sigma >= 0.001 && given.sigma <= 100)
    if (!holds) fault(`${path}/prior`, 'prior', `The prior of “${name}” needs a mean within ±100 and a one-sigma between 0.001 and 100.`)
    return [{ name: name.trim(), regions: keys.map(String), prior: holds ? given as ScalingGroup['prior'] : null }]
  })
  if (issues.length > 0) throw new InputError('The groups do not hold', issues)
  return groups
}
