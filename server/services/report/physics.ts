import { print } from '#shared/design/tokens'
import { dataUncertaintyRow, derivedMissing, derivedNote, derivedTable, modelUncertaintyTable, uncertaintyColumns, uncertaintyNote } from '#shared/figures/budget/physicsTables'
import { paragraph, sectionHead, size, textTable, together } from './style'
import type { UncertaintyTableRow } from '#shared/figures/budget/physicsTables'
import type { Block, ReportData } from './types'

const note = (text: string) => paragraph(text, { margin: [0, 6, 0, 0], fontSize: size.small, color: print.soft })

/** Sea level, gravity field and centre of mass; nothing where the record is too short for trends. */
export function derivedBlocks({ result }: ReportData): Block[] {
  const rows = derivedTable(result)
  if (!rows.length) return []
  const missing = derivedMissing(result)
  return [
    together(textTable({
      head: sectionHead('Derived quantities', 'per Julian year, with one sigma'),
      columns: ['Quantity', 'rate', 'unit'],
      rows: rows.map(({ name, value, sigma, unit }) => [name, sigma ? `${value}\u00a0${sigma}` : value, unit]),
      widths: [190, 90, '*'],
      right: [1],
    })),
    ...(missing ? [note(missing)] : []),
    note(derivedNote),
  ]
}

/** The model's own lines of uncertainty beside one sigma of the data; nothing for runs of engines that did not list them. */
export function modelUncertaintyBlocks({ result }: ReportData): Block[] {
  const rows = modelUncertaintyTable(result)
  if (!rows.length) return []
  const data = dataUncertaintyRow(result)
  const line = ({ name, text, cells }: UncertaintyTableRow, soft = false): (string | Block)[] => [
    { text: [{ text: name, color: soft ? print.soft : print.ink }, { text: `\n${text}`, color: print.soft }] }, ...cells,
  ]
  return [
    together(textTable({
      head: sectionHead('Model uncertainty', 'sizes per Julian year, beside the uncertainty of the data and never in it'),
      columns: ['Choice of the model', ...uncertaintyColumns.map(({ name, unit }) => `${name}, ${unit}`)],
      rows: [...rows.map(row => line(row)), ...(data ? [line(data, true)] : [])],
      widths: ['*', 58, 52, 52, 48],
      right: [1, 2, 3, 4],
    })),
    note(uncertaintyNote),
  ]
}
