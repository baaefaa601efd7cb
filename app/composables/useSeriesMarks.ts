import { settleMarks, type Mark, type MarkDecision } from '#shared/series/checks'
import type { Issue } from '#shared/types/issue'
import { decisionsToSend, withDecision, withEdit, withLeftOut } from '~/series/marks'
import type { ColumnChoices, Preview } from '~/series/preview'

/** What checks found in a preview, the decisions on it, and the corrections that follow from them. */
export function useSeriesMarks(read: Ref<Preview | null>, choices: Ref<ColumnChoices>) {
  const decisions = ref<MarkDecision[]>([])
  const shownMark = ref<string | null>(null)
  const marks = computed(() => settleMarks(read.value?.marks ?? [], decisions.value).marks)
  const open = computed(() => marks.value.filter(mark => mark.state === 'open').length)

  function decide(mark: Mark, choice: MarkDecision['choice'], note: string) {
    decisions.value = withDecision(decisions.value, { id: mark.id, choice, note: note.slice(0, 800) })
    if (choice === 'corrected' && shownMark.value === mark.id) shownMark.value = null
  }
  const accept = (mark: Mark, note: string) => decide(mark, 'accepted', note)
  function reopen(mark: Mark) {
    decisions.value = decisions.value.filter(({ id }) => id !== mark.id)
  }
  function fix(mark: Mark, row: number, text: string) {
    choices.value = withEdit(choices.value, { row, column: read.value!.chosen.valueColumn, text })
    decide(mark, 'corrected', `${mark.message} Row ${row} was corrected to ${text}.`)
  }
  function leave(mark: Mark) {
    choices.value = withLeftOut(choices.value, mark.rows, mark.message)
    decide(mark, 'corrected', `${mark.message} ${mark.rows.length === 1 ? 'The row was' : 'The rows were'} left out.`)
  }
  function fixIssue(issue: Issue, text: string) {
    const column = read.value?.columns.find(({ name }) => name === issue.column)
    if (column && issue.row !== undefined) choices.value = withEdit(choices.value, { row: issue.row, column: column.index, text })
  }
  function leaveIssue(issue: Issue) {
    if (issue.row !== undefined) choices.value = withLeftOut(choices.value, [issue.row], issue.message)
  }
  const toSend = () => decisionsToSend(read.value?.marks ?? [], decisions.value)
  return { decisions, shownMark, marks, open, accept, reopen, fix, leave, fixIssue, leaveIssue, toSend }
}
