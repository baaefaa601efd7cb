import { kindTexts } from '#shared/text/kinds'
import { regionKinds, type RegionKind } from '#shared/types/domain'
import type { RegionLine } from './types'

export const sortKeys = ['name', 'kind', 'agency', 'area', 'mass', 'day', 'drift', 'span', 'version'] as const
export type SortKey = typeof sortKeys[number]
export interface Sorting { key: SortKey, descending: boolean }

/** Largest loss first. */
export const defaultSorting: Sorting = { key: 'mass', descending: false }

/** The order that an address asks for: `sort=mass`, `sort=-area`. */
export function sortingOfQuery(text: unknown): Sorting {
  if (typeof text !== 'string') return defaultSorting
  const key = sortKeys.find(k => k === text.replace(/^-/, ''))
  return key ? { key, descending: text.startsWith('-') } : defaultSorting
}

export function queryOfSorting({ key, descending }: Sorting): string | undefined {
  return key === defaultSorting.key && descending === defaultSorting.descending ? undefined : `${descending ? '-' : ''}${key}`
}

export function kindOfQuery(text: unknown): RegionKind | null {
  return regionKinds.find(kind => kind === text) ?? null
}

/** What a column sorts by; null goes last either way. */
function sortValue(region: RegionLine, key: SortKey): string | number | null {
  switch (key) {
    case 'name': return region.name
    case 'kind': return kindTexts[region.kind]
    case 'agency': return region.agency.name
    case 'area': return region.outline.areaKm2
    case 'mass': return region.trend?.massGtPerYear.value ?? null
    case 'day': return region.trend?.lodMicrosecondsPerYear.value ?? null
    case 'drift': return region.trend?.driftCmPerYear.value ?? null
    case 'span': return region.series?.latest.firstMjd ?? null
    case 'version': return region.series?.latest.n ?? null
  }
}

export function sortedRegions(regions: readonly RegionLine[], { key, descending }: Sorting): RegionLine[] {
  const keyed = regions.map(region => ({ region, value: sortValue(region, key) }))
  keyed.sort((a, b) => {
    if (a.value === null || b.value === null) return (a.value === null ? 1 : 0) - (b.value === null ? 1 : 0)
    const order = typeof a.value === 'string' ? a.value.localeCompare(b.value as string, 'en', { numeric: true }) : a.value - (b.value as number)
    return descending ? -order : order
  })
  return keyed.map(k => k.region)
}

/** Regions of a kind whose name, agency or kind holds every word that was typed. */
export function filteredRegions(regions: readonly RegionLine[], kind: RegionKind | null, text: string): RegionLine[] {
  const words = text.toLocaleLowerCase('en').split(/\s+/).filter(Boolean)
  return regions.filter((region) => {
    if (kind && region.kind !== kind) return false
    const searched = `${region.name} ${region.agency.name} ${kindTexts[region.kind]}`.toLocaleLowerCase('en')
    return words.every(word => searched.includes(word))
  })
}

/** Texts of a column, padded with spaces of a digit's width so that their decimal signs stand under one another when set flush right. */
export function alignedOnDecimal(texts: readonly string[]): string[] {
  const decimals = (text: string) => /[\d]\.(\d+)$/.exec(text)?.[1]!.length ?? 0
  const most = Math.max(0, ...texts.map(decimals))
  return texts.map((text) => {
    const own = decimals(text)
    if (!/\d/.test(text) || own === most) return text
    return text + (own === 0 ? '\u2008' : '') + '\u2007'.repeat(most - own)
  })
}

/** Errors such as “± 15” and “± 0.36 %” made equally wide on both sides of the decimal sign, so that the values before them stand below one another. */
export function alignedSigmas(texts: readonly string[]): string[] {
  const parts = texts.map(text => /^(±\s?<?\s?)(\d+)(?:\.(\d+))?(.*)$/.exec(text))
  const most = (length: (part: RegExpExecArray) => number) => Math.max(0, ...parts.map(part => part ? length(part) : 0))
  const ahead = (part: RegExpExecArray) => part[2]!.length + (part[1]!.includes('<') ? 1 : 0)
  const [before, after] = [most(ahead), most(part => part[3]?.length ?? 0)]
  return texts.map((text, i) => {
    const part = parts[i]
    if (!part) return text
    const [, sign, integer, decimals = '', unit] = part
    return '\u2007'.repeat(before - ahead(part)) + sign + integer + (decimals ? `.${decimals}` : after ? '\u2008' : '') + '\u2007'.repeat(after - decimals.length) + unit
  })
}
