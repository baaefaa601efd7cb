import { angularMomentumQuestions, type AngularMomentumFields } from '#shared/observed/angularMomentumTypes'
import { isAngularMomentum, readAngularMomentum } from '#shared/observed/angularMomentum'
import { InputError, type Issue } from '#shared/types/issue'

/** Answers as they are typed; empty where a question is still open. */
export type FluidAnswers = Record<keyof AngularMomentumFields, string>
export const noAnswers = (): FluidAnswers => ({ component: '', model: '', pairedWith: '', invertedBarometer: '', coefficients: '', subtracted: '', barystatic: '' })

export type FluidReading = { understood: string[], issues: readonly Issue[], count: number, suggested: string | null, fault: null } | { fault: { text: string, issues: readonly Issue[] } }

/** Reads a file as the server will, before anything is sent. */
export function readFluidText(text: string): FluidReading {
  if (!isAngularMomentum(text)) return { fault: { text: 'This is no series of angular momentum.', issues: [{ code: 'no-rows', message: 'Each row needs a date, its Modified Julian Date, and six numbers: mass χ₁ χ₂ χ₃ and motion χ₁ χ₂ χ₃, dimensionless.' }] } }
  try {
    const { understood, issues, mjd, suggestedComponent } = readAngularMomentum(text)
    return { understood, issues, count: mjd.length, suggested: suggestedComponent, fault: null }
  }
  catch (error) {
    if (error instanceof InputError) return { fault: { text: `${error.message}.`, issues: error.issues } }
    throw error
  }
}

/** Questions that are still open; the atmosphere that drove it is asked of an ocean alone. */
export function openQuestions(answers: FluidAnswers): string[] {
  return angularMomentumQuestions.filter(({ field }) => field !== 'subtracted' && isAsked(field, answers) && !answers[field as keyof FluidAnswers].trim()).map(({ question }) => question)
}
export const isAsked = (field: string, answers: FluidAnswers) => field !== 'pairedWith' || answers.component === 'ocean'

/** The answers as they are stored. */
export function fieldsOf(answers: FluidAnswers): AngularMomentumFields {
  return { ...answers, model: answers.model.trim(), subtracted: answers.subtracted.trim(), pairedWith: isAsked('pairedWith', answers) ? answers.pairedWith.trim() || null : null } as AngularMomentumFields
}
