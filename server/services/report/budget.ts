import { print } from '#shared/design/tokens'
import { budgetColumns, budgetTable } from '#shared/figures/budget/table'
import { textWidth } from '#shared/figures/textWidth'
import { hairlines, headRow, size, together } from './style'
import type { AlignedText } from '#shared/figures/budget/aligned'
import type { BudgetTableRow } from '#shared/figures/budget/table'
import type { Block, ReportData } from './types'

/** Spaces as wide as the signs they stand for, so that decimal signs of a column meet: U+2007 a digit, U+2008 a full stop. */
function unseen(signs: string): string {
  return signs.replace(/\./g, '\u2008').replace(/[0-9+\u2212±<]/g, '\u2007').replace(/[^\u2007\u2008\u00a0\u202f]/g, '')
}

/** Columns that hold a figure with its uncertainty; direction and shares come after them. */
const measuredColumns = budgetColumns.findIndex(({ id }) => id === 'direction')

const filled = ({ before, text, after }: AlignedText) => `${unseen(before)}${text}${unseen(after)}`

function cellOf(row: BudgetTableRow, i: number): Block {
  const { value, sigma } = row.cells[i]!
  const isMeasured = i < measuredColumns
  return {
    text: isMeasured
      ? [{ text: `${value.text}${unseen(value.after)}` }, { text: `\u00a0${filled(sigma)}`, fontSize: size.tiny, color: print.soft, bold: false }]
      : `${value.text}${unseen(value.after)}`,
    alignment: 'right',
    noWrap: true,
  }
}

/** A budget of this many rows stands on one page. */
const mostUnbroken = 24

const figureSize = size.table - 0.5

/** Width of each column of figures, measured: a head that spans all columns would make the writer share out its own. */
function columnWidths(rows: readonly BudgetTableRow[]): number[] {
  return budgetColumns.map(({ name, unit }, i) => {
    const heads = [name, ...unit.split(' ')].map(word => textWidth(word, figureSize))
    const cells = rows.map(({ cells }) => {
      const { value, sigma } = cells[i]!
      const figure = textWidth(`${value.text}${unseen(value.after)}`, figureSize, 600)
      return i < measuredColumns ? figure + textWidth(`\u00a0${filled(sigma)}`, size.tiny) : figure
    })
    return Math.ceil(Math.max(...heads, ...cells) + 0.5)
  })
}

/** The budget: regions, model, background, rest of the world, and what was observed. */
export function reportBudget({ result, comparison }: ReportData, title: Block): Block {
  const rows = budgetTable(result, comparison)
  const columns: Block[] = [
    { text: 'Region', color: print.soft, margin: [0, size.table * 1.36, 0, 0] },
    ...budgetColumns.map(({ name, unit }) => ({ text: `${name}\n${unit}`, color: print.soft, alignment: 'right' })),
  ]
  const body = rows.map((row): Block[] => [
    { text: row.note ? [row.name, { text: `\n${row.note}`, fontSize: size.tiny, color: print.soft, bold: false }] : row.name },
    ...row.cells.map((_, i) => cellOf(row, i)),
  ].map(cell => ({ ...cell, bold: row.kind === 'model' })))
  // A rule above each group, and one below the table.
  const groups = rows.flatMap(({ kind }, i) => i > 0 && groupOf(kind) !== groupOf(rows[i - 1]!.kind) ? [i + 2] : [])
  const table: Block = {
    table: {
      headerRows: 2, keepWithHeaderRows: 1, dontBreakRows: true, widths: ['*', ...columnWidths(rows)],
      body: [headRow(title, columns.length), columns, ...body],
    },
    layout: { ...hairlines([2, ...groups, rows.length + 2], [0, 1]), paddingLeft: (i: number) => i === 0 ? 0 : 4.5 },
    fontSize: figureSize,
  }
  return rows.length <= mostUnbroken ? together(table) : table
}

function groupOf(kind: BudgetTableRow['kind']): string {
  return { region: 'region', model: 'model', background: 'rest', rest: 'rest', observed: 'observed', residual: 'observed' }[kind]
}
