import type { Position } from './domain.ts'

/** One fault in what somebody sent: where it is and why it does not hold. */
export interface Issue {
  /** Place in a JSON body, e.g. `regions/0/geometry/coordinates/0/3`. */
  path?: string
  /** 1-based row of a table, counted as in the file that was sent. */
  row?: number
  column?: string
  /** What stood there, cut to a readable length. */
  value?: string
  /** Of an outline: the lines that are wrong, as longitude and latitude, long ones thinned. */
  lines?: Position[][]
  code: string
  message: string
}

/** Thrown by readers and checks; the API turns it into problem+json with the same issues. */
export class InputError extends Error {
  readonly issues: Issue[]
  /** HTTP status that fits: 422 for content, 413 for size. */
  readonly status: 413 | 422

  constructor(message: string, issues: Issue[], status: 413 | 422 = 422) {
    super(message)
    this.name = 'InputError'
    this.issues = issues
    this.status = status
  }
}
