import type { ScalingGroup } from '#shared/attribution/groups'

export interface RegionName { key: string, name: string }
/** Which name each region is estimated under, empty for its own; priors as they are typed, by that name. */
export interface GroupDraft { nameOf: Record<string, string>, priors: Record<string, { mean: string, sigma: string }> }
/** Regions that get one factor: a group, or a region by itself. */
export interface Unit { id: string, name: string, regions: string[], grouped: boolean }

/** What gets a factor of its own, in the order of the regions. */
export function unitsOf(regions: readonly RegionName[], { nameOf }: GroupDraft): Unit[] {
  const units = new Map<string, Unit>()
  for (const { key, name } of regions) {
    const group = nameOf[key]?.trim()
    const id = group ? `group ${group}` : key
    const unit = units.get(id) ?? { id, name: group || name, regions: [], grouped: Boolean(group) }
    unit.regions.push(key)
    units.set(id, unit)
  }
  return [...units.values()]
}

/** A draft from the groups in an address; an empty one where they cannot be read. */
export function draftOf(text: string | undefined, regions: readonly RegionName[]): GroupDraft {
  const draft: GroupDraft = { nameOf: {}, priors: {} }
  let groups: ScalingGroup[] = []
  try {
    const json: unknown = text ? JSON.parse(text) : []
    groups = Array.isArray(json) ? (json as ScalingGroup[]).filter(group => Array.isArray(group?.regions) && typeof group.name === 'string') : []
  }
  catch {
    return draft
  }
  for (const { name, regions: keys, prior } of groups) {
    const alone = keys.length === 1 && regions.find(region => region.key === keys[0])?.name === name
    const id = alone ? keys[0]! : `group ${name}`
    if (!alone) for (const key of keys) draft.nameOf[key] = name
    if (prior) draft.priors[id] = { mean: String(prior.mean), sigma: String(prior.sigma) }
  }
  return draft
}

const numberOf = (typed: string) => Number(typed.trim().replace('\u2212', '-').replace(',', '.'))

/** What is wrong with the priors, unit by unit; empty where all hold. */
export function priorFaults(regions: readonly RegionName[], draft: GroupDraft): string[] {
  return unitsOf(regions, draft).flatMap(({ id, name }) => {
    const prior = draft.priors[id]
    if (!prior || (!prior.mean.trim() && !prior.sigma.trim())) return []
    const [mean, sigma] = [numberOf(prior.mean || '1'), numberOf(prior.sigma)]
    return prior.sigma.trim() && Math.abs(mean) <= 100 && sigma >= 0.001 && sigma <= 100 ? [] : [`${name}: a mean within ±100 and a one-sigma between 0.001 and 100 are needed.`]
  })
}

/** The draft for an address; undefined where every region stands by itself under the common prior. */
export function groupsText(regions: readonly RegionName[], draft: GroupDraft): string | undefined {
  const groups = unitsOf(regions, draft).flatMap(({ id, name, regions: keys, grouped }): ScalingGroup[] => {
    const typed = draft.priors[id]
    const prior = typed?.sigma.trim() ? { mean: numberOf(typed.mean || '1'), sigma: numberOf(typed.sigma) } : null
    return grouped || prior ? [{ name, regions: keys, prior }] : []
  })
  return groups.length > 0 ? JSON.stringify(groups) : undefined
}
