import { Problem } from './problem'
import type { Context } from '../services/context'

let current: Context | undefined

/** Set once by the start-up plugin; before that the instance is not ready. */
export function setContext(context: Context | undefined) {
  current = context
}

export function useContext(): Context {
  if (!current) throw new Problem(503, 'not-ready', 'The server is starting. Try again in a moment.')
  return current
}
