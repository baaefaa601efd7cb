import type { ScenarioDraft } from '#shared/api/schemas'
import { historyOf, redo, sameValue, step, undo } from '~/scenario/history'

interface Edited { name: string, draft: ScenarioDraft }

/** A scenario while it is edited: every change is a step that can be undone, and what is stored is remembered. */
export function useDraft(stored: Edited) {
  const saved = shallowRef<Edited>(structuredClone(toRaw(stored)))
  const history = shallowRef(historyOf<Edited>(saved.value))
  const name = computed(() => history.value.present.name)
  const draft = computed(() => history.value.present.draft)
  const set = (next: Partial<Edited>) => { history.value = step(history.value, { ...history.value.present, ...next }) }

  return {
    name, draft,
    dirty: computed(() => !sameValue(saved.value, history.value.present)),
    canUndo: computed(() => history.value.past.length > 0),
    canRedo: computed(() => history.value.future.length > 0),
    rename: (text: string) => set({ name: text }),
    change: (fn: (draft: ScenarioDraft) => ScenarioDraft) => set({ draft: fn(history.value.present.draft) }),
    undo: () => { history.value = undo(history.value) },
    redo: () => { history.value = redo(history.value) },
    /** What is on screen is what the server holds now. */
    markSaved: (state: Edited) => { saved.value = structuredClone(toRaw(state)) },
    /** Takes the server's state and forgets what is on screen. */
    replace: (state: Edited) => {
      saved.value = structuredClone(toRaw(state))
      history.value = historyOf(saved.value)
    },
  }
}
