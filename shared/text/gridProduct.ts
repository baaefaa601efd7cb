import { productQuestions, type GridProduct, type ProductAnswer, type ProductQuestion } from '../series/gridProduct.ts'

export const productTexts: Record<ProductQuestion, { question: string, hint: string, yes: string, no: string }> = {
  degreeOne: { question: 'Is degree 1 put in?', hint: 'Which series of the geocentre; without it mass between hemispheres is missing.', yes: 'Degree 1 is put in', no: 'Degree 1 is not put in' },
  c20: { question: 'Is C₂₀ replaced?', hint: 'Which series, as from laser ranging.', yes: 'C₂₀ is replaced', no: 'C₂₀ is not replaced' },
  c30: { question: 'Is C₃₀ replaced?', hint: 'From when on, and with which series; it matters most for Antarctica.', yes: 'C₃₀ is replaced', no: 'C₃₀ is not replaced' },
  isostatic: { question: 'Is isostatic adjustment taken out?', hint: 'Which model. Its error belongs into the systematic errors below.', yes: 'Isostatic adjustment is taken out', no: 'Isostatic adjustment is still inside' },
  leakage: { question: 'Is leakage between land and sea corrected?', hint: 'How: scale factors, mass blocks, forward modelling. What is left belongs into the systematic errors below.', yes: 'Leakage is corrected', no: 'Leakage is not corrected' },
}
export const productAnswerNames: Record<ProductAnswer['answer'], string> = { 'yes': 'yes', 'no': 'no', 'does-not-apply': 'does not apply', 'unknown': 'not said' }

/** What was answered, a sentence each; what was not said, in one sentence at the end. */
export function productSentences(product: GridProduct): string[] {
  const said = productQuestions.filter(key => product[key].answer === 'yes' || product[key].answer === 'no')
    .map(key => `${product[key].answer === 'yes' ? productTexts[key].yes : productTexts[key].no}${product[key].note ? ` (${product[key].note})` : ''}.`)
  const open = productQuestions.filter(key => product[key].answer === 'unknown')
  return open.length ? [...said, `Not said of the product: ${open.map(key => names[key]).join(', ')}.`] : said
}

const names: Record<ProductQuestion, string> = { degreeOne: 'degree 1', c20: 'C₂₀', c30: 'C₃₀', isostatic: 'isostatic adjustment', leakage: 'leakage' }
