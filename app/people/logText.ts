/** One thing of a logged row, before and after; null where it was not there. */
export interface FieldChange { field: string, before: string | null, after: string | null }

const names: Record<string, string> = {
  agencyId: 'agency', outline: 'outline SHA-256', dataSha256: 'values SHA-256', originalSha256: 'original SHA-256', inputSha256: 'input SHA-256',
  resultSha256: 'result SHA-256', rowsStored: 'rows stored', rowsLeftOut: 'rows left out', inBin: 'in the bin', userId: 'person', n: 'version',
  bytes: 'size in bytes', workspaceId: 'workspace', scenarioId: 'scenario', runId: 'run', regionId: 'region',
}

function flat(value: unknown, path = ''): [string, unknown][] {
  if (value === null || value === undefined) return []
  if (typeof value !== 'object') return [[path, value]]
  const entries = Array.isArray(value) ? value.map((item, i) => [String(i + 1), item] as const) : Object.entries(value)
  if (Array.isArray(value) && value.every(item => typeof item !== 'object' || item === null)) return [[path, value.join(', ')]]
  return entries.flatMap(([key, item]) => flat(item, path ? `${path} / ${key}` : key))
}

/** What to read for a value: names for ids that are known, a checksum's beginning, yes and no. */
export function valueText(value: unknown, idNames: ReadonlyMap<string, string>): string {
  if (value === true) return 'yes'
  if (value === false) return 'no'
  if (typeof value === 'number') return String(value).replace('-', '\u2212')
  const text = String(value)
  if (/^[0-9a-f]{64}$/.test(text)) return `${text.slice(0, 12)}…`
  return idNames.get(text) ?? (text === '' ? 'empty' : text)
}

/** The fields in which a logged change differs, in the order of the row; fields that stayed are left out. */
export function fieldChanges(before: unknown, after: unknown, idNames: ReadonlyMap<string, string> = new Map()): FieldChange[] {
  const [old, now] = [new Map(flat(before)), new Map(flat(after))]
  const fields = [...new Set([...old.keys(), ...now.keys()])]
  return fields.flatMap((path) => {
    const [a, b] = [old.get(path), now.get(path)]
    if (a === b) return []
    const field = path.split(' / ').map(part => names[part] ?? part.replace(/([a-z])([A-Z])/g, (_, x: string, y: string) => `${x} ${y.toLowerCase()}`)).join(' / ')
    return [{ field, before: a === undefined ? null : valueText(a, idNames), after: b === undefined ? null : valueText(b, idNames) }]
  })
}

/** Where a logged row can be seen; null where it has no page. */
export function entityLink(entity: string, id: string, after: unknown): string | null {
  if (entity === 'region') return `/regions/${id}`
  if (entity === 'series' && typeof after === 'object' && after !== null && typeof (after as { region?: unknown }).region === 'string') return `/regions/${(after as { region: string }).region}`
  if (entity === 'observed') return `/observations/${id}`
  if (entity === 'scenario') return `/scenarios/${id}`
  if (entity === 'run') return `/runs/${id}`
  return null
}

/** The change on one line: the first few fields, checksums left out. */
export function changeSummary(changes: readonly FieldChange[], most = 3): string {
  const telling = changes.filter(change => !change.field.endsWith('SHA-256'))
  const shown = telling.slice(0, most).map(({ field, before, after }) => {
    if (before !== null && after !== null) return `${field}: ${before} → ${after}`
    return after !== null ? `${field}: ${after}` : `${field}: ${before} taken away`
  })
  const rest = changes.length - shown.length
  return `${shown.join('; ')}${shown.length && rest > 0 ? `; ${rest} more` : ''}` || `${changes.length === 1 ? 'one checksum' : `${changes.length} checksums`}`
}

/** What a logged row was called, as far as the entry itself or the known names tell. */
export function entryName(entityId: string, before: unknown, after: unknown, idNames: ReadonlyMap<string, string>): string {
  const own = (value: unknown, key: string) => typeof value === 'object' && value !== null && typeof (value as Record<string, unknown>)[key] === 'string' ? (value as Record<string, string>)[key]! : ''
  return idNames.get(entityId) || own(after, 'name') || own(after, 'title') || own(after, 'email') || own(before, 'name') || idNames.get(own(after, 'region')) || idNames.get(own(before, 'userId')) || ''
}
