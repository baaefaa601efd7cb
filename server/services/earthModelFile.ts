import { loadDetailedEarthModel } from '#shared/earth/detailedEarthModel'
import type { EarthModel } from '#shared/earth/earthModel'

/** The Earth model that this build ships, with the ocean inside outlines. */
export function earthModelFrom(_fieldsPath: string | null): EarthModel {
  return loadDetailedEarthModel()
}
