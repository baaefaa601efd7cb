import { iceKinds, type RegionKind } from '#shared/types/domain'
import type { Issue } from '#shared/types/issue'
import type { DraftRegion } from './draft'

/** A region's choice with another way of its water. What is the default is left out, so that an untouched draft stays as it was. */
export function withWater(choice: DraftRegion, part: Partial<Pick<DraftRegion, 'fractionToOcean' | 'restTo' | 'groundedFraction'>>): DraftRegion {
  const { fractionToOcean, restTo, groundedFraction, ...rest } = { ...choice, ...part }
  return {
    ...rest,
    ...((fractionToOcean ?? 1) < 1 ? { fractionToOcean, restTo: restTo ?? null } : {}),
    ...((groundedFraction ?? 1) < 1 ? { groundedFraction } : {}),
  }
}

export const isIce = (kind: RegionKind) => (iceKinds as readonly string[]).includes(kind)

/** A part of 1 as per cent, without the dust of binary fractions. */
export const percentOf = (part: number | undefined) => Number(((part ?? 1) * 100).toFixed(6))
export const partOf = (percent: number) => Number((percent / 100).toFixed(8))

/** What the server refused of the region at a place of the draft, by field. */
export function issuesOfRegion(issues: readonly Issue[], index: number): { field: string, message: string }[] {
  return issues.flatMap(({ path, message }) => {
    const [, at, field] = /^(?:draft\/)?regions\/(\d+)(?:\/(\w+))?/.exec(path ?? '') ?? []
    return at !== undefined && Number(at) === index ? [{ field: field ?? '', message }] : []
  })
}
