import { factRows } from '#shared/text/seriesFacts'
import type { Mark } from '#shared/series/checks'
import type { VersionToCompare } from '#shared/series/versions'
import type { AnswerOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'

export type VersionData = AnswerOf<typeof contracts.seriesVersionRead>

/** What a stored recipe says of how a version was read; versions from before corrections and checks have none. */
export interface ShownRecipe {
  steps: string[]
  /** Rows that could not be used and were left out when the version was stored. */
  leftOut: number
  leftOutOnPurpose: { row: number, reason: string, text: string }[]
  edited: { row: number, column: number, text: string, was: string }[]
  checks: { found: number, open: number, marks: Mark[], corrected: { id: string, note: string }[] } | null
}

const list = <T>(value: unknown): T[] => Array.isArray(value) ? value as T[] : []

export function shownRecipe(recipe: Readonly<Record<string, unknown>>): ShownRecipe {
  const checks = recipe.checks as ShownRecipe['checks'] | undefined
  return {
    steps: list<string>(recipe.steps), leftOut: Number(recipe.leftOutCount ?? 0), leftOutOnPurpose: list(recipe.leftOutOnPurpose), edited: list(recipe.edited),
    checks: checks && Array.isArray(checks.marks) ? { ...checks, corrected: list(checks.corrected) } : null,
  }
}

/** A stored version as versions are compared. */
export function toCompare(version: VersionData): VersionToCompare {
  const { mjd, massGt, sigmaGt, sharedRates, source, licence, independence, facts } = version
  return { mjd, massGt, sigmaGt, sharedRates, steps: shownRecipe(version.recipe).steps, facts: { Source: source, Licence: licence, Independence: independence, ...Object.fromEntries(factRows(facts).map(({ name, text }) => [name[0]!.toUpperCase() + name.slice(1), text])) } }
}

/** The changed epochs, the largest changes first; all epochs that a shift moves count as one. */
export function largestChanges<T extends { before: number, after: number }>(changed: readonly T[], most: number): T[] {
  return [...changed].sort((a, b) => Math.abs(b.after - b.before) - Math.abs(a.after - a.before)).slice(0, most)
}
