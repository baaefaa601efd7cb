const words = [
  'no', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine', 'ten', 'eleven', 'twelve',
] as const

/** A count as text writes it: six, 13. */
export function countWord(n: number): string {
  return words[n] ?? String(n)
}

/** A count with its noun: one region, six regions. */
export function counted(n: number, singular: string, plural = `${singular}s`): string {
  return `${countWord(n)} ${n === 1 ? singular : plural}`
}

/** Names in a row: a, b and c. */
export function listed(items: readonly string[]): string {
  if (items.length < 2) return items.join('')
  return `${items.slice(0, -1).join(', ')} and ${items.at(-1)}`
}
