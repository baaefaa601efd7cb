import { print } from '#shared/design/tokens'
import type { Block } from './types'

/** A4 in points; what stands between the margins. */
export const page = { margin: { left: 46, top: 58, right: 46, bottom: 54 }, contentWidth: 595.28 - 92 } as const

export const size = { body: 9.5, small: 8, table: 7.5, tiny: 6.5, head: 19 } as const

/** A black rule with the name of a section and, softer, what it holds. */
export function sectionHead(name: string, unit = ''): Block {
  return {
    stack: [
      { canvas: [{ type: 'line', x1: 0, y1: 0, x2: page.contentWidth, y2: 0, lineWidth: 0.8, lineColor: print.ink }] },
      { text: [{ text: name, bold: true }, { text: unit ? `  ${unit}` : '', color: print.soft }], margin: [0, 5, 0, 6], fontSize: size.body },
    ],
    margin: [0, 16, 0, 0],
  }
}

/** Keeps a head with the first thing below it. */
export function together(...blocks: Block[]): Block {
  return { stack: blocks, unbreakable: true }
}

export function paragraph(text: string, options: Block = {}): Block {
  return { text, margin: [0, 0, 0, 5], lineHeight: 1.25, ...options }
}

/** A vector figure, scaled to a width in points. */
export function figure(svg: string, width: number = page.contentWidth): Block {
  return { svg, width }
}

/** A caution with its coloured rule at the side. */
export function caution(text: string): Block {
  return {
    table: { widths: ['*'], body: [[{ text, color: print.soft, lineHeight: 1.2, margin: [6, 1, 0, 1] }]] },
    layout: { hLineWidth: () => 0, vLineWidth: (i: number) => i === 0 ? 2 : 0, vLineColor: () => print.caution, paddingLeft: () => 2, paddingRight: () => 0, paddingTop: () => 0, paddingBottom: () => 0 },
    margin: [0, 4, 0, 4],
    unbreakable: true,
  }
}

/** Hairlines between rows, nothing else. `strong` names rows that a black rule goes above, `bare` those without any. */
export function hairlines(strong: readonly number[] = [], bare: readonly number[] = [0]): Block {
  return {
    hLineWidth: (i: number) => bare.includes(i) ? 0 : 0.5,
    hLineColor: (i: number) => strong.includes(i) ? print.ink : print.hairline,
    vLineWidth: () => 0,
    paddingLeft: (i: number) => i === 0 ? 0 : 5,
    paddingRight: () => 0,
    paddingTop: () => 2.5,
    paddingBottom: () => 2.5,
  }
}

/** The first head row of a table: a section's head, repeated with the columns' heads on every page that the table reaches. */
export function headRow(head: Block, columns: number): Block[] {
  return [{ ...head, colSpan: columns, fontSize: size.body }, ...Array.from({ length: columns - 1 }, () => ({}))]
}

export interface TextTable {
  head: Block
  /** Column heads; none for a plain list. */
  columns: string[]
  rows: (string | Block)[][]
  widths: (number | string)[]
  /** Columns that stand to the right. */
  right?: readonly number[]
}

/** A section that is one table: its head, soft heads of columns, rows. */
export function textTable({ head, columns, rows, widths, right = [] }: TextTable): Block {
  const align = (i: number) => right.includes(i) ? 'right' : 'left'
  const body = rows.map(row => row.map((cell, i) => typeof cell === 'string' ? { text: cell, alignment: align(i) } : { alignment: align(i), ...cell }))
  const heads = columns.length ? [columns.map((text, i) => ({ text, color: print.soft, alignment: align(i) }))] : []
  const headerRows = 1 + heads.length
  return {
    table: { headerRows, keepWithHeaderRows: 2, dontBreakRows: true, widths, body: [headRow(head, widths.length), ...heads, ...body] },
    layout: hairlines(heads.length ? [headerRows] : [], heads.length ? [0, 1] : [0, 1]),
    fontSize: size.table,
  }
}
