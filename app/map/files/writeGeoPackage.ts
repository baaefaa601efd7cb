import { outlineForFile, type WrittenOutline } from '#shared/geo/forFile'
import { polygonsOf } from '#shared/geo/parts'
import { writeWkb } from '#shared/geo/wkb'
import type { Outline } from '#shared/types/domain'
import { loadSqlite } from './sqlite'

const applicationId = 0x47504B47
const version = 10300
const wgs84 = 'GEOGCS["WGS 84",DATUM["WGS_1984",SPHEROID["WGS 84",6378137,298.257223563,AUTHORITY["EPSG","7030"]],AUTHORITY["EPSG","6326"]],PRIMEM["Greenwich",0,AUTHORITY["EPSG","8901"]],UNIT["degree",0.0174532925199433,AUTHORITY["EPSG","9122"]],AXIS["Latitude",NORTH],AXIS["Longitude",EAST],AUTHORITY["EPSG","4326"]]'

/** The tables that a GeoPackage must have (OGC 12-128r18, 1.1 and 2.1), and ours. */
const tables = `
CREATE TABLE gpkg_spatial_ref_sys (srs_name TEXT NOT NULL, srs_id INTEGER NOT NULL PRIMARY KEY, organization TEXT NOT NULL, organization_coordsys_id INTEGER NOT NULL, definition TEXT NOT NULL, description TEXT);
CREATE TABLE gpkg_contents (table_name TEXT NOT NULL PRIMARY KEY, data_type TEXT NOT NULL, identifier TEXT UNIQUE, description TEXT DEFAULT '', last_change DATETIME NOT NULL DEFAULT (strftime('%Y-%m-%dT%H:%M:%fZ','now')), min_x DOUBLE, min_y DOUBLE, max_x DOUBLE, max_y DOUBLE, srs_id INTEGER, CONSTRAINT fk_gc_r_srs_id FOREIGN KEY (srs_id) REFERENCES gpkg_spatial_ref_sys(srs_id));
CREATE TABLE gpkg_geometry_columns (table_name TEXT NOT NULL, column_name TEXT NOT NULL, geometry_type_name TEXT NOT NULL, srs_id INTEGER NOT NULL, z TINYINT NOT NULL, m TINYINT NOT NULL, CONSTRAINT pk_geom_cols PRIMARY KEY (table_name, column_name), CONSTRAINT uk_gc_table_name UNIQUE (table_name), CONSTRAINT fk_gc_tn FOREIGN KEY (table_name) REFERENCES gpkg_contents(table_name), CONSTRAINT fk_gc_srs FOREIGN KEY (srs_id) REFERENCES gpkg_spatial_ref_sys (srs_id));
CREATE TABLE regions (fid INTEGER PRIMARY KEY AUTOINCREMENT NOT NULL, geom MULTIPOLYGON, name TEXT, kind TEXT, agency TEXT);`

/** Outlines as a GeoPackage with one layer, “regions”, in WGS 84. Degrees. */
export async function geoPackageOf(outlines: readonly WrittenOutline[]): Promise<Uint8Array> {
  const { Database } = await loadSqlite()
  const database = new Database()
  try {
    database.run(`PRAGMA application_id = ${applicationId}; PRAGMA user_version = ${version};${tables}`)
    const systems = [
      ['WGS 84 geodetic', 4326, 'EPSG', 4326, wgs84, 'longitude and latitude in degrees on WGS 84'],
      ['Undefined cartesian', -1, 'NONE', -1, 'undefined', 'undefined cartesian coordinate reference system'],
      ['Undefined geographic', 0, 'NONE', 0, 'undefined', 'undefined geographic coordinate reference system'],
    ]
    for (const system of systems) database.run('INSERT INTO gpkg_spatial_ref_sys VALUES (?, ?, ?, ?, ?, ?)', system)
    const written = outlines.map(outline => ({ ...outline, geometry: outlineForFile(outline.geometry) }))
    const [west, south, east, north] = extent(written.map(({ geometry }) => geometry))
    database.run('INSERT INTO gpkg_contents (table_name, data_type, identifier, min_x, min_y, max_x, max_y, srs_id) VALUES (\'regions\', \'features\', \'regions\', ?, ?, ?, ?, 4326)', [west, south, east, north])
    database.run('INSERT INTO gpkg_geometry_columns VALUES (\'regions\', \'geom\', \'MULTIPOLYGON\', 4326, 0, 0)')
    for (const { name, kind, agency, geometry } of written) {
      database.run('INSERT INTO regions (geom, name, kind, agency) VALUES (?, ?, ?, ?)', [blobOf(geometry), name, kind ?? null, agency ?? null])
    }
    return database.export()
  }
  finally {
    database.close()
  }
}

/** West, south, east, north in degrees. */
function extent(outlines: readonly Outline[]): [number, number, number, number] {
  return outlines.flatMap(polygonsOf).flat(2).reduce<[number, number, number, number]>(
    ([west, south, east, north], [x, y]) => [Math.min(west, x), Math.min(south, y), Math.max(east, x), Math.max(north, y)], [180, 90, -180, -90])
}

/** “GP”, version 1, flags (little-endian, envelope of four numbers), system 4326, west, east, south, north, then well-known binary. */
function blobOf(outline: Outline): Uint8Array {
  const wkb = writeWkb(outline)
  const out = new Uint8Array(40 + wkb.length)
  out.set([0x47, 0x50, 0, 0b11])
  const view = new DataView(out.buffer)
  const [west, south, east, north] = extent([outline])
  view.setInt32(4, 4326, true)
  ;[west, east, south, north].forEach((value, k) => view.setFloat64(8 + 8 * k, value, true))
  out.set(wkb, 40)
  return out
}
