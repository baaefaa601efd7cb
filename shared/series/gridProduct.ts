import type { Answer } from './facts.ts'

/** What a gravity product needs to be told: what was done to it before it became a grid. */
export const productQuestions = ['degreeOne', 'c20', 'c30', 'isostatic', 'leakage'] as const
export type ProductQuestion = typeof productQuestions[number]

export interface ProductAnswer { answer: Answer | 'does-not-apply', note: string }
export type GridProduct = Record<ProductQuestion, ProductAnswer>

export const productAnswers = ['yes', 'no', 'does-not-apply', 'unknown'] as const
