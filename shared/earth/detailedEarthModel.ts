import { oceanCellsBase64 } from './data/oceanCells.ts'
import { loadEarthModel, withOceanField, type EarthModel } from './earthModel.ts'
import { oceanField } from './oceanFunction.ts'
import { decodeOceanCells, type OceanCells } from './oceanCells.ts'

/** The ocean function's cells, decoded from the constant data (0.25°, some 10 ms). */
export function loadOceanCells(): OceanCells {
  return decodeOceanCells(oceanCellsBase64)
}

/** The constant model with the sea's field, so that sea inside an outline is noticed; for servers (70 KB of data). */
export function loadDetailedEarthModel(): EarthModel {
  return withOceanField(loadEarthModel(), oceanField(loadOceanCells()))
}
