import { formatLongDate, formatNumber } from '#shared/format/numbers'
import { listed } from '#shared/text/words'
import type { ObservedSeries } from '#shared/types/run'

export const formatTexts: Readonly<Record<ObservedSeries['format'], { name: string, source: string }>> = {
  eop14c04: { name: 'IERS EOP 14 C04', source: 'International Earth Rotation and Reference Systems Service, EOP 14 C04' },
  eop20c04: { name: 'IERS EOP 20 C04', source: 'International Earth Rotation and Reference Systems Service, EOP 20 C04' },
  finals2000a: { name: 'IERS finals2000A', source: 'International Earth Rotation and Reference Systems Service, Rapid Service/Prediction Centre, finals2000A' },
  csv: { name: 'Table (CSV)', source: '' },
}

export const formatName = (format: string): string => format === 'gravity' ? 'Gravity coefficients of degree two' : formatTexts[format as ObservedSeries['format']]?.name ?? format

interface Held { name: string, format?: string, has: { lod: boolean, pole: boolean, excitation?: boolean }, latest: { count: number, firstMjd: number, lastMjd: number } }

/** What a series holds, in one sentence. */
export function observedSentence({ name, format, has, latest }: Held): string {
  const span = `at ${formatNumber(latest.count)} epochs, ${formatLongDate(latest.firstMjd)} to ${formatLongDate(latest.lastMjd)}`
  if (format === 'gravity') return `${name} holds gravity coefficients of degree two ${span}; they stand for ${listed([has.lod ? 'the length of day' : '', has.excitation ? 'the excitation of the pole' : ''].filter(Boolean)) || 'nothing that is used'}.`
  const parts = [has.lod ? 'the excess length of day' : '', has.pole ? 'the pole' : '', has.excitation ? 'the excitation of the pole' : ''].filter(Boolean)
  return `${name} holds ${listed(parts) || 'no quantity that is used'} ${span}.`
}

/** What has not been taken out of a series as it is stored. */
export function stillInside(has: { lod: boolean, pole: boolean, excitation?: boolean }): string[] {
  return [
    ...(has.lod ? ['zonal tides in the length of day, among them the 18.6-year one of about 0.15 ms', 'coupling of core and mantle, a few ms over decades'] : []),
    'angular momentum of atmosphere and ocean, most of the seasonal and interannual change',
    'glacial isostatic adjustment and other background rates',
    ...(has.pole ? ['the Chandler wobble of 433 days, which a comparison takes out through the excitation'] : []),
    ...(has.pole || has.excitation ? ['long-period ocean tides in polar motion'] : []),
  ]
}
