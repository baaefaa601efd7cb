interface Undoable { undo: () => void, redo: () => void }

/** Ctrl+Z and Ctrl+Shift+Z (or Ctrl+Y) step through a draft. Text that is being typed keeps its own undo. */
export function useUndoKeys({ undo, redo }: Undoable) {
  let typing: EventTarget | null = null
  const typed = (event: Event) => { typing = event.target }
  const committed = () => { typing = null }
  const onKey = (event: KeyboardEvent) => {
    if (!(event.ctrlKey || event.metaKey) || event.altKey || document.querySelector('dialog[open]')) return
    const key = event.key.toLowerCase()
    const back = key === 'z' && !event.shiftKey
    const forth = (key === 'z' && event.shiftKey) || key === 'y'
    if (!back && !forth) return
    const field = event.target instanceof HTMLInputElement || event.target instanceof HTMLTextAreaElement
    if (field && typing === event.target) return
    event.preventDefault()
    if (back) undo()
    else redo()
  }
  onMounted(() => {
    window.addEventListener('keydown', onKey)
    window.addEventListener('input', typed)
    window.addEventListener('change', committed)
  })
  onBeforeUnmount(() => {
    window.removeEventListener('keydown', onKey)
    window.removeEventListener('input', typed)
    window.removeEventListener('change', committed)
  })
}
