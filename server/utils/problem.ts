import { ModeNotAvailableError } from '#shared/earth/earthModel'
import { InputError, type Issue } from '#shared/types/issue'

const titles: Record<number, string> = {
  400: 'The request cannot be read', 401: 'Sign in first', 403: 'Not allowed', 404: 'Not found', 409: 'Changed meanwhile',
  410: 'No longer there', 413: 'Too large', 415: 'Wrong type of content', 422: 'The content does not hold', 429: 'Too many tries',
  500: 'The server failed', 501: 'Not available in this version', 503: 'Not ready',
}

/** What the API answers when it cannot do what was asked: RFC 9457, with the faults one by one. */
export class Problem extends Error {
  readonly status: number
  readonly code: string
  readonly issues: Issue[]

  constructor(status: number, code: string, detail: string, issues: Issue[] = []) {
    super(detail)
    this.name = 'Problem'
    this.status = status
    this.code = code
    this.issues = issues
  }
}

export interface ProblemBody { type: string, title: string, status: number, code: string, detail?: string, issues?: Issue[] }

/** The one place where a failure becomes problem+json. What is not foreseen says nothing of the inside. */
export function problemBody(error: unknown): ProblemBody {
  const known = error instanceof Problem
    ? error
    : error instanceof InputError
      ? new Problem(error.status, error.status === 413 ? 'too-large' : 'invalid', error.message, error.issues)
      : error instanceof ModeNotAvailableError
        ? new Problem(501, 'not-available', error.message)
        : new Problem(500, 'internal', 'Something failed on the server. What you entered was not stored.')
  return {
    type: `urn:counterpoise:problem:${known.code}`,
    title: titles[known.status] ?? 'Failed',
    status: known.status,
    code: known.code,
    detail: known.message,
    ...(known.issues.length ? { issues: known.issues.slice(0, 200) } : {}),
  }
}
