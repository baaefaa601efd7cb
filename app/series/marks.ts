import type { Mark, MarkDecision, MarkKind } from '#shared/series/checks'
import type { ColumnChoices } from './preview'

/** Kinds of finding in words. */
export const markTexts: Record<MarkKind, string> = {
  'gap': 'gap', 'duplicate': 'same epoch twice', 'order': 'out of order', 'outlier': 'outlier', 'step': 'step',
  'suspicious-unit': 'size or unit', 'flat-run': 'flat run', 'disagreement': 'disagreement',
}

/** A single value can be put right; a stretch can only be left out or accepted. */
export const canFix = (mark: Mark) => mark.kind === 'outlier' && mark.rows.length === 1
export const canLeaveOut = (mark: Mark) => (mark.kind === 'outlier' || mark.kind === 'flat-run') && mark.rows.length > 0

export function withDecision(decisions: readonly MarkDecision[], next: MarkDecision): MarkDecision[] {
  return [...decisions.filter(({ id }) => id !== next.id), next]
}

type Edit = NonNullable<ColumnChoices['edits']>[number]

/** Choices with a cell put right; the same cell once. */
export function withEdit(choices: ColumnChoices, edit: Edit): ColumnChoices {
  return { ...choices, edits: [...(choices.edits ?? []).filter(e => e.row !== edit.row || e.column !== edit.column), edit] }
}
export function withoutEdit(choices: ColumnChoices, { row, column }: { row: number, column: number }): ColumnChoices {
  return pruned({ ...choices, edits: (choices.edits ?? []).filter(e => e.row !== row || e.column !== column) })
}

/** Choices with rows left out on purpose; a row once, with the latest reason. */
export function withLeftOut(choices: ColumnChoices, rows: readonly number[], reason: string): ColumnChoices {
  const kept = (choices.leaveOut ?? []).filter(({ row }) => !rows.includes(row))
  return { ...choices, leaveOut: [...kept, ...[...new Set(rows)].map(row => ({ row, reason: reason.slice(0, 400) }))] }
}
export function withoutLeftOut(choices: ColumnChoices, row: number): ColumnChoices {
  return pruned({ ...choices, leaveOut: (choices.leaveOut ?? []).filter(left => left.row !== row) })
}

/** Choices as they are without any correction of rows. */
export function withoutCorrections({ edits: _, leaveOut: __, ...choices }: ColumnChoices): ColumnChoices {
  return choices
}

function pruned(choices: ColumnChoices): ColumnChoices {
  const next = { ...choices }
  if (next.edits?.length === 0) delete next.edits
  if (next.leaveOut?.length === 0) delete next.leaveOut
  return next
}

/** Decisions on what is still found or was corrected: one that was undone is no decision. */
export function decisionsToSend(marks: readonly Mark[], decisions: readonly MarkDecision[]): MarkDecision[] {
  const present = new Set(marks.map(mark => mark.id))
  return decisions.filter(({ id, choice }) => choice === 'accepted' ? present.has(id) : !present.has(id))
}

/** A kept draft's decisions. */
export function decisionsOfDraft(kept: unknown): MarkDecision[] {
  if (!Array.isArray(kept)) return []
  return (kept as MarkDecision[]).filter(d => typeof d?.id === 'string' && typeof d.note === 'string' && (d.choice === 'accepted' || d.choice === 'corrected'))
}

/** Marks as stretches under a chart: none narrower than can be seen. */
export function markSpans(marks: readonly Mark[], fromMjd: number, toMjd: number): [number, number][] {
  const least = (toMjd - fromMjd) * 0.004
  return marks.filter(mark => mark.kind !== 'disagreement').map(({ fromMjd: from, toMjd: to }) => {
    const widen = Math.max(0, least - (to - from)) / 2
    return [Math.max(fromMjd, from - widen), Math.min(toMjd, to + widen)]
  })
}
