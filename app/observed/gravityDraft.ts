import { formatNumber } from '#shared/format/numbers'
import { isGravityTable, readGravityCoefficients } from '#shared/observed/gravityCoefficients'
import { gravityQuestions, type GravityFields, type GravitySeries } from '#shared/observed/gravityTypes'
import { InputError, type Issue } from '#shared/types/issue'
import type { ObservedColumns } from './panels'

/** Answers as they are typed; empty where a question is still open. */
export type GravityAnswers = Record<keyof GravityFields, string>
export const noGravityAnswers = (): GravityAnswers => ({ solidPoleTide: '', oceanPoleTide: '', permanentTide: '', meanPole: '', radiusM: '', dealiasing: '', axialLoadFactor: '0.695' })

/** Whether a text names gravity coefficients in its head; the rows behind it do not matter. */
export function looksLikeGravity(text: string): boolean {
  try {
    return isGravityTable(text.slice(0, 20_000))
  }
  catch {
    return false
  }
}

export type GravityReading = { series: GravitySeries, fault: null } | { series: null, fault: { text: string, issues: readonly Issue[] } }

/** Reads a text as the server will, before anything is sent. */
export function readGravityText(text: string, exponent?: number): GravityReading {
  try {
    return { series: readGravityCoefficients(text, exponent === undefined ? {} : { exponent }), fault: null }
  }
  catch (error) {
    if (error instanceof InputError) return { series: null, fault: { text: `${error.message}.`, issues: error.issues } }
    throw error
  }
}

/** Questions that are still open, and answers that cannot be. */
export function openGravityQuestions(answers: GravityAnswers): string[] {
  return gravityQuestions.flatMap(({ field, question }) => {
    const answer = answers[field as keyof GravityFields].trim()
    if (!answer) return [question]
    return field === 'radiusM' && !(radiusOf(answer) >= 6.35e6 && radiusOf(answer) <= 6.4e6) ? ['The reference radius must be in metres, like 6378136.3.'] : []
  })
}
const radiusOf = (typed: string) => Number(typed.replace(/[\s\u00a0\u202f]/g, '').replace(',', '.'))

/** The answers as they are stored. */
export function gravityFieldsOf(answers: GravityAnswers): GravityFields {
  return { ...answers, radiusM: radiusOf(answers.radiusM), axialLoadFactor: Number(answers.axialLoadFactor) } as GravityFields
}

/** The answers of a stored series in words, one line each. */
export function gravityAnswerLines(fields: GravityFields): { question: string, answer: string }[] {
  return gravityQuestions.map(({ field, question, choices }) => {
    const value = String(fields[field as keyof GravityFields])
    return { question, answer: choices?.find(choice => choice.value === value)?.text ?? `${formatNumber(Number(value), 1)} m` }
  })
}

/** The coefficients as charts take them. */
export function gravityColumnsOf(series: GravitySeries): ObservedColumns {
  const plain = (values: Float64Array): (number | null)[] => Array.from(values, v => Number.isFinite(v) ? v : null)
  const { c20, c21, s21, sigmaC20, sigmaC21, sigmaS21 } = series
  return {
    mjd: Array.from(series.mjd), lodMs: [], xMas: [], yMas: [], sigmaLodMs: [], sigmaXMas: [], sigmaYMas: [], predicted: new Array<number>(series.mjd.length).fill(0),
    coefficients: { c20: plain(c20), c21: plain(c21), s21: plain(s21), sigmaC20: plain(sigmaC20), sigmaC21: plain(sigmaC21), sigmaS21: plain(sigmaS21) },
  }
}
