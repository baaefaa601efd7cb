import { alignedOnDecimal, alignedSigmas } from '~/regions/regionRows'

/** A figure in two parts: the value, and “± 0.20” with what stands behind it, empty where there is none. */
export interface FigureParts { value: string, sigma: string }

/** Rows of figures such as “+5.16 ± 0.20” in two parts, both aligned on the decimal sign down each column. */
export function alignedRows(rows: readonly (readonly string[])[]): FigureParts[][] {
  const columns = (rows[0] ?? []).map((_, i) => {
    const parts = rows.map(row => /^(.*?)(?:\s(±.*))?$/.exec(row[i]!)!)
    const [values, sigmas] = [alignedOnDecimal(parts.map(part => part[1]!)), alignedSigmas(parts.map(part => part[2] ?? ''))]
    return values.map((value, row) => ({ value, sigma: sigmas[row]! }))
  })
  return rows.map((_, row) => columns.map(column => column[row]!))
}
