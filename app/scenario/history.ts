/** States of something that is edited, for undo and redo. Never changed in place: every step gives a new history. */
export interface History<T> { past: readonly T[], present: T, future: readonly T[] }

/** Steps that are kept; each holds a whole draft, which is small. */
const mostSteps = 200

export function historyOf<T>(present: T): History<T> {
  return { past: [], present, future: [] }
}

/** A new state. Equal to the one before: nothing happens, so that leaving a field unchanged is no step. */
export function step<T>(history: History<T>, next: T): History<T> {
  if (sameValue(history.present, next)) return history
  return { past: [...history.past, history.present].slice(-mostSteps), present: next, future: [] }
}

export function undo<T>(history: History<T>): History<T> {
  const previous = history.past.at(-1)
  if (previous === undefined) return history
  return { past: history.past.slice(0, -1), present: previous, future: [history.present, ...history.future] }
}

export function redo<T>(history: History<T>): History<T> {
  const next = history.future[0]
  if (next === undefined) return history
  return { past: [...history.past, history.present], present: next, future: history.future.slice(1) }
}

/** Whether two plain values hold the same, whatever the order of their keys. */
export function sameValue(a: unknown, b: unknown): boolean {
  if (Object.is(a, b)) return true
  if (typeof a !== 'object' || typeof b !== 'object' || a === null || b === null) return false
  if (Array.isArray(a) !== Array.isArray(b)) return false
  const keys = Object.keys(a)
  return keys.length === Object.keys(b).length
    && keys.every(key => key in b && sameValue((a as Record<string, unknown>)[key], (b as Record<string, unknown>)[key]))
}
