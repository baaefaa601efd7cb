import type { Issue } from '#shared/types/issue'

/** Kinds of bad row in words, for a count of each. */
const texts: Record<string, string> = {
  'missing-epoch': 'without an epoch',
  'bad-epoch': 'with an epoch that cannot be read',
  'duplicate-epoch': 'with an epoch that stands in an earlier row',
  'missing-value': 'without a value',
  'missing-sigma': 'without a one-sigma',
  'not-a-number': 'with a cell that is not a number',
  'sigma-not-positive': 'with a one-sigma that is not positive',
  'missing-cell': 'with too few cells',
  'open-quote': 'with a quotation mark that is never closed',
}

export interface IssueGroup { code: string, text: string, count: number }

/** How many rows there are of each kind, the most frequent first. */
export function issueGroups(issues: readonly Issue[]): IssueGroup[] {
  const counts = new Map<string, number>()
  for (const { code } of issues) counts.set(code, (counts.get(code) ?? 0) + 1)
  return [...counts].map(([code, count]) => ({ code, count, text: texts[code] ?? code.replaceAll('-', ' ') })).sort((a, b) => b.count - a.count)
}

/** Where a line begins and ends in a text whose lines end in \n; the last line for one beyond the end. */
export function lineRange(text: string, line: number): [number, number] {
  let start = 0
  for (let i = 1; i < line; i++) {
    const next = text.indexOf('\n', start)
    if (next < 0) break
    start = next + 1
  }
  const end = text.indexOf('\n', start)
  return [start, end < 0 ? text.length : end]
}
