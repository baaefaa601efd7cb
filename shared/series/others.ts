/** Earlier versions that a new one is held against, the newest first. */
export const versionsHeldAgainst = 3
/** Part of each outline that is common ground from which on two regions hold the same. */
const SAME_GROUND = 0.9

/** The versions to hold a new one against: the newest with different values. */
export function earlierVersions<T extends { dataSha256: string }>(versions: readonly T[]): T[] {
  return versions.filter((version, i) => versions.findIndex(other => other.dataSha256 === version.dataSha256) === i).slice(0, versionsHeldAgainst)
}

/** Whether two outlines cover so much the same ground that their series must agree. */
export function onSameGround(share: number, shareOfOther: number): boolean {
  return share > SAME_GROUND && shareOfOther > SAME_GROUND
}
