import { mjdFromIsoDate } from '../earth/time/epochs.ts'
import type { Chain } from '../observed/chainTypes.ts'
import { rowsInSpan } from '../observed/steps.ts'
import { defaultChandler } from '../earth/time/polarMotion.ts'
import type { ObservedSeries, RunInput, RunResult } from '../types/run.ts'
import { modelWithBackground } from './compared.ts'
import { forwardPole } from './forward.ts'
import { ut1Difference } from './ut1.ts'

type Column = (number | null)[]
/** Pole as in the reports of the IERS: x towards Greenwich, y towards 90° W, mas. */
export interface ForwardReport { stretches: { mjd: number[], xMas: Column, yMas: Column, observedXMas: Column, observedYMas: Column, freeWobbleMas: number, rmsMas: number }[], sentence: string }
export interface Ut1Report { stretches: { mjd: number[], ut1Ms: number[], sigmaMs: number[] }[], caution: string }

const plain = (values: ArrayLike<number>): Column => Array.from(values, v => Number.isNaN(v) ? null : v)

/** The prediction, background included, integrated to the pole beside the observed one over the rows that the chain takes. */
export function forwardReport(input: RunInput, result: RunResult, series: ObservedSeries, chain: Chain): ForwardReport {
  if (!series.xMas.some(Number.isFinite)) return { stretches: [], sentence: 'The series holds no pole to be compared in the pole plane.' }
  const span = { fromMjd: chain.from ? mjdFromIsoDate(chain.from) : null, toMjd: chain.to ? mjdFromIsoDate(chain.to) : null }
  const rows = rowsInSpan(series, span, chain.includePredictions)
  const excitation = chain.steps.find(step => step.kind === 'excitation')
  const chandler = excitation?.kind === 'excitation' ? { periodDays: excitation.periodDays, q: excitation.q } : defaultChandler
  const predicted = { mjd: result.epochsMjd, chi1Mas: modelWithBackground(input, result, 'chi1'), chi2Mas: modelWithBackground(input, result, 'chi2') }
  const { stretches, sentence } = forwardPole(predicted, rows, { chandler })
  return {
    sentence,
    stretches: stretches.map(({ mjd, xMas, yMas, observedXMas, observedYMas, freeWobbleMas, rmsMas }) => ({
      mjd: Array.from(mjd), xMas: plain(xMas), yMas: plain(yMas), observedXMas: plain(observedXMas), observedYMas: plain(observedYMas), freeWobbleMas, rmsMas
    }))
  }
}

/** What the regions alone do to UT1, with the one-sigma that the error of their trend makes. */
export function ut1Report(result: RunResult): Ut1Report {
  const { stretches, caution } = ut1Difference({
    mjd: result.epochsMjd, lodMs: result.total.series.lodMicroseconds.map(v => v === null ? null : v / 1000),
    rateSigmaMsPerYear: (result.total.lodMicrosecondsPerYear?.sigma ?? 0) / 1000
  })
  return { caution, stretches: stretches.map(({ mjd, ut1Ms, sigmaMs }) => ({ mjd: Array.from(mjd), ut1Ms: Array.from(ut1Ms), sigmaMs: Array.from(sigmaMs) })) }
}
