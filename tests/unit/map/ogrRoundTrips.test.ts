import { execFileSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { zipSync } from 'fflate'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { readBytes } from '../../../app/map/files/readBrought'
import { outlineFormats } from '../../../app/map/files/writeFiles'
import { outlineForFile, type WrittenOutline } from '../../../shared/geo/forFile'
import { polygonsOf } from '../../../shared/geo/parts'
import type { Outline, Position } from '../../../shared/types/domain'
import { box, geographicLibAreaM2 } from '../geo/geodesicArea'

// Debian's ogr2ogr and ogrinfo (GDAL) write the files that are read here and read the files that are written here.
// Areas are GeographicLib's on both sides (C. F. F. Karney, J. Geodesy 87, 2013), of the rings as they stand in the file.

const folder = mkdtempSync(join(tmpdir(), 'counterpoise-ogr-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))

function gdal(tool: 'ogr2ogr' | 'ogrinfo', ...args: string[]): string {
  try {
    return execFileSync(tool, args, { encoding: 'utf8', stdio: ['ignore', 'pipe', 'pipe'], cwd: folder })
  }
  catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') throw new Error(`${tool} is missing: install gdal-bin`)
    throw error
  }
}

function areaM2(outline: Outline, stepDeg?: number): number {
  const sumOf = (rings: readonly Position[][]) => rings.reduce((sum, ring) => sum + geographicLibAreaM2(ring, stepDeg), 0)
  return polygonsOf(outline).reduce((sum, [shell, ...holes]) => sum + sumOf([shell!]) - sumOf(holes), 0)
}

/** A ring along a parallel, in steps of so many degrees, closed a whole turn on. */
const parallel = (lat: number, step: number): Position[] => Array.from({ length: 360 / step + 1 }, (_, k) => [-170 + k * step, lat])
const hole = (ring: Position[]) => [...ring].reverse()

const outlines: WrittenOutline[] = [
  { name: 'Zwölf Weiher & <Süd>', kind: 'basin', agency: 'Amt “A”', geometry: { type: 'Polygon', coordinates: [box(8.1234567890123, 46, 10, 48), hole(box(8.5, 46.5, 9, 47))] } },
  { name: '東の湖', kind: 'lake', agency: 'Amt', geometry: { type: 'MultiPolygon', coordinates: [[box(100, 10, 101, 11)], [box(102, 10, 103, 11.5), hole(box(102.2, 10.2, 102.4, 10.4))]] } },
  { name: 'Across the line', kind: 'aquifer', geometry: { type: 'Polygon', coordinates: [box(175, -20, 190, -10)] } },
  { name: 'South cap', kind: 'ice-sector', geometry: { type: 'Polygon', coordinates: [parallel(-70, 10)] } },
]

/** What ogr2ogr makes of a file of ours: GeoJSON with every digit. */
function readByOgr(file: string): { name: string | null, geometry: Outline }[] {
  const text = gdal('ogr2ogr', '-f', 'GeoJSON', '-lco', 'COORDINATE_PRECISION=17', '-lco', 'RFC7946=NO', '/vsistdout/', file)
  const { features } = JSON.parse(text) as { features: { properties: { name?: string, Name?: string }, geometry: Outline }[] }
  return features.map(({ properties, geometry }) => ({ name: properties.name ?? properties.Name ?? null, geometry }))
}

describe('what is written here', () => {
  it('covers what was drawn, cut where files need it: the cap between 70° S and the pole, 15° of longitude across the line', () => {
    const [line, cap] = [outlineForFile(outlines[2]!.geometry), outlineForFile(outlines[3]!.geometry)]
    expect(Math.abs(areaM2(line, 0.05) / areaM2(outlines[2]!.geometry, 0.05) - 1)).toBeLessThan(1e-6)
    for (const outline of [line, cap]) expect(polygonsOf(outline).flat(2).every(([lon, lat]) => Math.abs(lon) <= 180 && Math.abs(lat) <= 90)).toBe(true)
    // Area of a polar cap on the ellipsoid in closed form, through the authalic latitude (J. P. Snyder, USGS PP 1395, 1987, 3-12).
    const e = Math.sqrt(0.0066943799901413165)
    const s = Math.sin(70 * Math.PI / 180)
    const q = (x: number) => (1 - e * e) * (x / (1 - e * e * x * x) + Math.atanh(e * x) / e)
    const closed = Math.PI * 6378137 ** 2 * (q(1) - q(s))
    expect(Math.abs(areaM2(cap, 0.05) / closed - 1)).toBeLessThan(1e-6)
  })

  it.each(outlineFormats.map(format => [format.name, format] as const))('as %s is read by ogr2ogr with the same areas and names', async (_, { ending, write }) => {
    const file = join(folder, `written.${ending}`)
    const content = await write(outlines)
    writeFileSync(file, content)
    // Well-known text is no file to ogr2ogr; as a column of a table it is.
    if (ending === 'wkt') writeFileSync(join(folder, 'written.csv'), `n,WKT\n${String(content).trim().split('\n').map((line, k) => `${k},"${line}"`).join('\n')}\n`)
    const found = readByOgr(ending === 'wkt' ? join(folder, 'written.csv') : ending === 'zip' ? `/vsizip/${file}` : file)
    expect(found).toHaveLength(outlines.length)
    found.forEach(({ name, geometry }, k) => {
      if (ending !== 'wkt') expect(name).toBe(outlines[k]!.name)
      expect(Math.abs(areaM2(geometry) / areaM2(outlineForFile(outlines[k]!.geometry)) - 1)).toBeLessThan(1e-9)
    })
  })

  it('as a GeoPackage and as a shapefile names its system, its layer and its extent to ogrinfo', async () => {
    for (const [ending, source, layer] of [['gpkg', 'info.gpkg', 'regions'], ['zip', '/vsizip/info.zip', 'outlines']] as const) {
      writeFileSync(join(folder, `info.${ending}`), await outlineFormats.find(format => format.ending === ending)!.write(outlines.slice(0, 2)))
      const told = gdal('ogrinfo', '-so', source, layer)
      expect(told).toContain('Feature Count: 2')
      expect(told).toMatch(/GEOGCRS\["(?:WGS 84|GCS_WGS_1984)"/)
      expect(told).toMatch(/Extent: \(8\.123457, 10\.000000\) - \(103\.000000, 48\.000000\)/)
      expect(told).toMatch(/name: String[\s\S]*kind: String[\s\S]*agency: String/)
      expect(told).not.toMatch(/warning|error/i)
    }
  })
})

describe('what ogr2ogr writes', () => {
  const source = join(folder, 'source.geojson')
  const flat = outlines.slice(0, 2)
  beforeAll(() => writeFileSync(source, JSON.stringify({
    type: 'FeatureCollection',
    features: [
      ...flat.map(({ name, kind, geometry }) => ({ type: 'Feature', properties: { name, kind, rank: 3 }, geometry })),
      { type: 'Feature', properties: { name: 'A gauge' }, geometry: { type: 'Point', coordinates: [0, 0] } },
    ],
  })))

  // Straight edges of a projection are no straight edges in longitude and latitude: they are followed to a metre, 1e-5 of an edge of 100 km.
  it.each([
    ['EPSG:4326', 1e-9], ['EPSG:3857', 1e-5], ['EPSG:6933', 1e-5], ['EPSG:4258', 1e-9],
  ])('as GeoPackage in %s is read with its areas, names and attributes', async (system, within) => {
    const file = join(folder, `${system.slice(5)}.gpkg`)
    gdal('ogr2ogr', '-f', 'GPKG', file, source, '-t_srs', system)
    const read = await readBytes(readFileSync(file), 'lat-lon')
    expect(read.outlines.map(outline => outline.name)).toEqual(flat.map(outline => outline.name))
    expect(read.outlines[0]!.attributes).toMatchObject({ kind: 'basin', rank: '3' })
    expect(read.leftOut).toBe(1)
    // These boxes have edges along meridians and parallels, straight in all of these systems: densified, their areas are GeographicLib's.
    read.outlines.forEach(({ geometry }, k) => {
      expect(Math.abs(areaM2(geometry, 0.05) / areaM2(flat[k]!.geometry, 0.05) - 1)).toBeLessThan(within)
    })
  })

  it('as shapefile, KML and GeoPackage holds the same outlines', async () => {
    gdal('ogr2ogr', '-f', 'ESRI Shapefile', 'shape.shp', source, '-where', 'rank = 3', '-lco', 'ENCODING=UTF-8')
    gdal('ogr2ogr', '-f', 'KML', 'shape.kml', source, '-where', 'rank = 3', '-dsco', 'NameField=name')
    gdal('ogr2ogr', '-f', 'GPKG', 'shape.gpkg', source, '-where', 'rank = 3')
    const parts = ['shp', 'dbf', 'shx', 'prj', 'cpg'].map(ending => [`shape.${ending}`, new Uint8Array(readFileSync(join(folder, `shape.${ending}`)))] as const)
    for (const bytes of [zipSync(Object.fromEntries(parts)), readFileSync(join(folder, 'shape.kml')), readFileSync(join(folder, 'shape.gpkg'))]) {
      const { outlines: found } = await readBytes(bytes, 'lat-lon')
      expect(found.map(outline => outline.name)).toEqual(flat.map(outline => outline.name))
      found.forEach(({ geometry }, k) => expect(Math.abs(areaM2(geometry) / areaM2(flat[k]!.geometry) - 1)).toBeLessThan(1e-9))
    }
  })

  it('in a system whose datum is not known is refused by its name, as a database that is none is', async () => {
    gdal('ogr2ogr', '-f', 'GPKG', 'bern.gpkg', source, '-t_srs', '+proj=somerc +lat_0=46.95240555555556 +lon_0=7.439583333333333 +k_0=1 +x_0=600000 +y_0=200000 +ellps=bessel +units=m +no_defs')
    await expect(readBytes(readFileSync(join(folder, 'bern.gpkg')), 'lat-lon')).rejects.toThrow(/The file is in .+, and how its datum lies/)
    gdal('ogr2ogr', '-f', 'SQLite', 'plain.sqlite', source)
    await expect(readBytes(readFileSync(join(folder, 'plain.sqlite')), 'lat-lon')).rejects.toThrow('not a GeoPackage')
    await expect(readBytes(readFileSync(join(folder, 'bern.gpkg')).subarray(0, 5000), 'lat-lon')).rejects.toThrow('damaged or cut off')
  })
})
