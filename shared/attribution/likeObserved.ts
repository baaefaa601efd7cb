import { present } from '../earth/time/monthlyMeans.ts'
import { smooth } from '../earth/time/smoothing.ts'
import { fitTrend } from '../earth/time/trend.ts'
import type { Chain } from '../observed/chainTypes.ts'
import { seasonsOf, straightPart } from '../observed/steps.ts'

/**
 * A prediction treated as the observed series was: seasons, smoothing and trend taken out wherever the chain takes them out, so that
 * the two can be compared. Steps that only an observation needs (tides, excitation, air and sea, months) leave it as it is.
 *
 * @param value monthly values, null where there is none
 */
export function likeObserved(chain: Chain, mjd: readonly number[], value: readonly (number | null)[]): (number | null)[] {
  let track: Float64Array = Float64Array.from(value, v => v ?? Number.NaN)
  for (const step of chain.steps) {
    if (!step.on) continue
    if (step.kind === 'seasons') {
      const season = seasonsOf(mjd, track)?.season
      if (season) track = track.map((v, i) => v - season[i]!)
    } else if (step.kind === 'smoothing') {
      track = Float64Array.from(smooth(mjd, track, step.smoothing.kind, step.smoothing.widthDays))
    } else if (step.kind === 'detrend') {
      const { epochs, values } = present(mjd, track)
      if (epochs.length >= 3) {
        const fit = fitTrend({ mjd: epochs, value: values })
        track = track.map((v, i) => v - straightPart(fit, mjd[i]!))
      }
    }
  }
  return Array.from(track, v => Number.isNaN(v) ? null : v)
}
