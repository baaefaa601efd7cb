import type { EarthModel } from '../earth/earthModel.ts'
import type { ReferenceCheck } from './check.ts'
import { loadChecks } from './loads.ts'
import { publishedChecks } from './published.ts'
import { timeSeriesChecks } from './timeSeries.ts'

/** Every reference that the engine is held against, computed now by the engine that runs. Needs the sensitivity fields. */
export function allChecks(model: EarthModel): ReferenceCheck[] {
  return [...publishedChecks(model), ...loadChecks(model), ...timeSeriesChecks()]
}
