import { formatLongitude, formatMeasured, formatSigned } from '#shared/format/numbers'
import { kindTexts } from '#shared/text/kinds'
import { stands } from '~/regions/sentences'
import type { RegionItem } from '~/regions/types'
import { colouringTexts, quantityOf, trendColouring, withoutTrend, type Colouring } from './colouring'
import { monthFigure } from './months'

export interface ListRow {
  id: string
  name: string
  facts: string
  figure: { value: string, sigma: string } | null
  /** What stands in place of the figure. */
  without: string
  tone: string
}

export function listUnit(colouring: Colouring): string {
  return colouring === 'month' ? colouringTexts.month.unit : `${colouringTexts[trendColouring(colouring)].unit} ± 1σ`
}

/** The rows beside the map, in the order of their names. */
export function listRows(regions: readonly RegionItem[], colouring: Colouring, massOf: (id: string) => number | null | undefined): ListRow[] {
  const rows = trendRows(regions, colouring)
  if (colouring !== 'month') return rows
  return rows.map((row) => {
    const mass = massOf(row.id)
    const value = typeof mass === 'number' ? mass : null
    return {
      ...row,
      figure: value === null ? null : { value: formatSigned(value, Math.abs(value) < 10 ? 1 : 0), sigma: '' },
      without: monthFigure(mass),
      tone: value === null ? '' : value < 0 ? 'text-loss' : 'text-gain',
    }
  })
}

function trendRows(regions: readonly RegionItem[], colouring: Colouring): ListRow[] {
  return [...regions].sort((a, b) => a.name.localeCompare(b.name, 'en', { numeric: true })).map((region) => {
    const value = quantityOf(region, trendColouring(colouring))
    const towards = colouring === 'pole' && region.trend && region.trend.directionDegEast !== null ? `, pole to ${formatLongitude(region.trend.directionDegEast)}` : ''
    return {
      id: region.id,
      name: region.name,
      facts: `${kindTexts[region.kind]}, ${region.agency.name}${towards}`,
      figure: value && formatMeasured(value.value, value.sigma, { significant: colouring === 'mass' ? 4 : 3, signed: colouring !== 'pole' }),
      without: withoutTrend(region),
      tone: !value || !stands(value) ? '' : trendColouring(colouring) !== 'mass' ? 'text-model' : value.value < 0 ? 'text-loss' : 'text-gain',
    }
  })
}
