import { attributionReport, type AttributionReport, type AttributionTask } from '#shared/attribution/report'
import { InputError, type Issue } from '#shared/types/issue'

/** What an attribution says, or why it cannot be made: an error that is thrown loses its issues between threads. */
export type AttributionAnswer = { report: AttributionReport } | { fault: { message: string, issues: Issue[] } }

/** A run attributed to an observed series, away from the thread that answers requests. */
export default function attribution(task: AttributionTask): AttributionAnswer {
  try {
    return { report: attributionReport(task) }
  }
  catch (error) {
    if (error instanceof InputError) return { fault: { message: error.message, issues: error.issues } }
    throw error
  }
}
