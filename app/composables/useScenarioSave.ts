import type { Issue } from '#shared/types/issue'
import type { useDraft } from './useDraft'

interface SaveOptions { id: string, editor: ReturnType<typeof useDraft>, revision: number, reload: () => Promise<unknown> }

/** Saving a scenario: the revision that was seen goes along; somebody else's change is asked about, never written over unseen. */
export function useScenarioSave({ id, editor, revision: first, reload }: SaveOptions) {
  const api = useApi()
  const revision = ref(first)
  const busy = ref(false)
  const fault = shallowRef<{ text: string, issues: readonly Issue[], conflict: boolean } | null>(null)

  async function save(): Promise<boolean> {
    if (busy.value) return false
    busy.value = true
    fault.value = null
    const sent = { name: editor.name.value, draft: editor.draft.value }
    try {
      const stored = await api('scenarioChange', { params: { id }, body: { revision: revision.value, ...sent } })
      revision.value = stored.revision
      editor.markSaved(sent)
      // Runs and overlaps of the saved state come when they come; a run need not wait for them.
      void reload()
      return true
    }
    catch (error) {
      fault.value = {
        text: problemText(error), issues: error instanceof ApiProblem ? error.issues : [],
        conflict: error instanceof ApiProblem && error.status === 409,
      }
      return false
    }
    finally {
      busy.value = false
    }
  }

  /** After a conflict: what the others stored, in place of what is on screen; or what is on screen, on top of theirs. */
  async function settle(keep: 'mine' | 'theirs') {
    try {
      const current = await api('scenarioRead', { params: { id } })
      revision.value = current.revision
      fault.value = null
      if (keep === 'mine') {
        await save()
        return
      }
      editor.replace({ name: current.name, draft: current.draft })
      await reload()
    }
    catch (error) {
      fault.value = { text: problemText(error), issues: [], conflict: true }
    }
  }

  return { revision, busy, fault, save, settle }
}
