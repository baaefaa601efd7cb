/** One page of a list that is ordered by descending ULID: rows were asked for with limit + 1. */
export function pageOf<R extends { id: string }, V>(rows: R[], limit: number, view: (row: R) => V): { items: V[], nextCursor: string | null } {
  const more = rows.length > limit
  const items = more ? rows.slice(0, limit) : rows
  return { items: items.map(view), nextCursor: more ? items.at(-1)!.id : null }
}
