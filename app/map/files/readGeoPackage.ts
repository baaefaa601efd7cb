import type { Database } from 'sql.js'
import { limits, readOutlineFeatures } from '#shared/geo/outline'
import { readWkb } from '#shared/geo/wkb'
import type { Outline } from '#shared/types/domain'
import { InputError } from '#shared/types/issue'
import type { ReadOutlines } from '../readPasted'
import { convertOutline, projectionOf, type Projection } from './projection'
import { loadSqlite } from './sqlite'

/** The whole file is held in the browser's memory, twice. */
const mostBytes = 64 * 1024 * 1024
const envelopeBytes = [0, 32, 48, 48, 64]

/** Outlines of every layer of a GeoPackage (OGC 12-128r18) in WGS 84, names from the attributes. Throws InputError. */
export async function readGeoPackage(bytes: Uint8Array): Promise<ReadOutlines> {
  if (bytes.length > mostBytes) throw new InputError('The GeoPackage is over 64 MiB. Save the layer that is wanted by itself, or simplify it.', [], 413)
  const { Database } = await loadSqlite()
  let database: Database | undefined
  try {
    database = new Database(bytes)
    return readLayers(database)
  }
  catch (error) {
    if (error instanceof InputError) throw error
    throw new InputError('The GeoPackage is damaged or cut off.', [], 422)
  }
  finally {
    database?.close()
  }
}

interface Layer { table: string, column: string, sridName: string, definition: string }

function readLayers(database: Database): ReadOutlines {
  const features: object[] = []
  let leftOut = 0
  for (const layer of layersOf(database)) {
    let projection: Projection | undefined
    const rows = database.prepare(`SELECT * FROM ${quoted(layer.table)}`)
    try {
      while (rows.step()) {
        const row = rows.getAsObject()
        const outline = geometryOf(row[layer.column])
        if (!outline) {
          leftOut++
          continue
        }
        if (features.length >= limits.outlines) throw new InputError(`There are more than ${limits.outlines} outlines here; at most so many are read at once.`, [], 422)
        projection ??= systemOf(layer)
        features.push({ type: 'Feature', properties: row, geometry: convertOutline(outline, projection) })
      }
    }
    finally {
      rows.free()
    }
  }
  if (!features.length) throw new InputError('There is no area in the GeoPackage.', [], 422)
  const read = readOutlineFeatures({ type: 'FeatureCollection', features })
  return { ...read, leftOut: leftOut + read.leftOut, typed: false }
}

function layersOf(database: Database): Layer[] {
  const tables = (database.exec('SELECT name FROM sqlite_master')[0]?.values ?? []).flat()
  const needed = ['gpkg_contents', 'gpkg_geometry_columns', 'gpkg_spatial_ref_sys']
  if (!needed.every(name => tables.includes(name))) throw new InputError('This is an SQLite database but not a GeoPackage: its tables of contents are missing.', [], 422)
  // Newer files may keep the definition of a system in a second column, and write “undefined” in the first.
  const second = (database.exec('SELECT name FROM pragma_table_info(\'gpkg_spatial_ref_sys\')')[0]?.values ?? []).flat().includes('definition_12_063')
  const found = database.exec(`SELECT g.table_name, g.column_name, s.srs_name, s.definition, ${second ? 's.definition_12_063' : '\'\''}, g.srs_id
    FROM gpkg_geometry_columns g JOIN gpkg_contents c ON c.table_name = g.table_name LEFT JOIN gpkg_spatial_ref_sys s ON s.srs_id = g.srs_id
    WHERE c.data_type = 'features' ORDER BY c.rowid`)[0]?.values ?? []
  if (!found.length) throw new InputError('The GeoPackage holds no layer of features.', [], 422)
  return found.map(row => row.map(value => String(value ?? ''))).map(([table, column, name, first, other, srid]) => ({
    table: table!, column: column!, sridName: name || `system ${srid}`, definition: /\[/.test(first!) ? first! : other!,
  }))
}

function systemOf({ table, sridName, definition }: Layer): Projection {
  if (!/\[/.test(definition)) {
    throw new InputError(`The layer ${table.slice(0, 60)} is in ${sridName.slice(0, 80)}, of which the file does not say where it lies. Save it in WGS 84 longitude and latitude.`, [], 422)
  }
  return projectionOf(definition)
}

/** A geometry blob: “GP”, version, flags, system, an envelope that may be missing, then well-known binary. */
function geometryOf(value: unknown): Outline | null {
  if (!(value instanceof Uint8Array)) return null
  const flags = value[3]!
  const envelope = envelopeBytes[(flags >> 1) & 7]
  if (value[0] !== 0x47 || value[1] !== 0x50 || envelope === undefined) throw new InputError('A geometry in the GeoPackage is not written as the standard says.', [], 422)
  const empty = (flags & 0x10) !== 0
  const extended = (flags & 0x20) !== 0
  return empty || extended ? null : readWkb(value.subarray(8 + envelope))
}

function quoted(name: string): string {
  return `"${name.replaceAll('"', '""')}"`
}
