import { fitSeries, type FitSettings, type SeriesFit } from '#shared/series/fit/fitSeries'
import type { MassSeries } from '#shared/types/run'
import { answerOf, type WorkerAnswer } from './parts/answer'

export interface FitTask { series: Pick<MassSeries, 'mjd' | 'massGt' | 'sigmaGt'>, settings: FitSettings }

/** Fit of a series, away from the thread that answers requests: the power law takes seconds for thousands of epochs. */
export default function fit({ series, settings }: FitTask): Promise<WorkerAnswer<SeriesFit>> {
  return answerOf(() => Promise.resolve().then(() => fitSeries(series, settings)))
}
