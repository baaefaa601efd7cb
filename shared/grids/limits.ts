/** Limits of grids; each says what it guards. */
export const gridLimits = {
  /** A file: 0.5° × 240 months in single precision is 249 MB. */
  bytes: 512 * 1024 * 1024,
  /** Regions that are taken from a grid at once. */
  regions: 200,
  /** Cells of one month on the map: more than the eye tells apart. */
  mapCells: 40_000,
  /** Members of a Monte Carlo. */
  members: 100_000,
} as const
