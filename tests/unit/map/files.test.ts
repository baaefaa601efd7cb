import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { zipSync } from 'fflate'
import { describe, expect, it } from 'vitest'
import { readBytes, readText } from '../../../app/map/files/readBrought'
import { polygonsOf } from '../../../shared/geo/parts'
import { looksLikeWkt, readWkt } from '../../../shared/geo/readWkt'
import { spreadOf } from '../../../shared/geo/spread'
import { outlinesAsGeoJson, outlinesAsKml, outlinesAsWkt } from '../../../shared/geo/writeOutline'
import type { Outline, Position } from '../../../shared/types/domain'

const fixture = (name: string) => new Uint8Array(readFileSync(fileURLToPath(new URL(`../../fixtures/outlines/${name}`, import.meta.url))))
const source = JSON.parse(new TextDecoder().decode(fixture('source.geojson'))) as { features: { properties: { name: string }, geometry: Outline }[] }
const names = source.features.map(feature => feature.properties.name)
const read = (name: string) => readBytes(fixture(name), 'lat-lon')
const vertices = (outline: Outline): Position[] => polygonsOf(outline).flat(2)

/** Each vertex of the source is a vertex of the outline, to 2e-7°: 2 cm. */
function expectVertices(outline: Outline, of: Outline): void {
  for (const [lon, lat] of vertices(of)) {
    const nearest = Math.min(...vertices(outline).map(([x, y]) => Math.max(Math.abs(x - lon), Math.abs(y - lat))))
    expect(nearest).toBeLessThan(2e-7)
  }
}

describe('a zipped shapefile', () => {
  it('in longitude and latitude comes as it was, with its names', async () => {
    const { outlines, typed } = await read('shapefile-wgs.zip')
    expect(typed).toBe(false)
    expect(outlines.map(outline => outline.name)).toEqual(names)
    outlines.forEach(({ geometry }, k) => {
      expect(vertices(geometry)).toHaveLength(vertices(source.features[k]!.geometry).length)
      expectVertices(geometry, source.features[k]!.geometry)
    })
  })

  // Areas in m² by GDAL, see the fixtures' README. An edge may stray by a metre: along edges of 600 km that is under 1e-5 of these areas.
  it.each([
    ['utm', [17833205728.4803, 9781541753.24566]],
    ['laea', [17832602457.1399, 9781616922.80249]],
    ['merc', [17842490468.5973, 9780242902.55146]],
  ])('in the projection %s is converted with its edges, and its area is GDAL’s', async (system, areas) => {
    const { outlines } = await read(`shapefile-${system}.zip`)
    expect(outlines.map(outline => outline.name)).toEqual(names)
    outlines.forEach(({ geometry }, k) => {
      expectVertices(geometry, source.features[k]!.geometry)
      expect(Math.abs(spreadOf(geometry).areaM2 / areas[k]! - 1)).toBeLessThan(1e-5)
    })
  })

  it('in polar stereographic keeps the pole inside', async () => {
    const { outlines: [cap] } = await read('shapefile-polarst.zip')
    const polar = JSON.parse(new TextDecoder().decode(fixture('polar.geojson'))) as typeof source
    expect(cap!.name).toBe('Cap')
    expectVertices(cap!.geometry, polar.features[0]!.geometry)
    expect(Math.abs(spreadOf(cap!.geometry).areaM2 / 5864052506916.44 - 1)).toBeLessThan(1e-5)
  })

  it('is refused by name where its datum is not known, and without a .prj', async () => {
    await expect(read('shapefile-bern.zip')).rejects.toThrow('CH1903_LV03')
    await expect(read('shapefile-noprj.zip')).rejects.toThrow('no .prj')
  })

  it('is refused where it is cut off, holds nothing, or comes unpacked', async () => {
    await expect(readBytes(fixture('shapefile-utm.zip').subarray(0, 400), 'lat-lon')).rejects.toThrow('damaged')
    await expect(readBytes(zipSync({ 'a.txt': new Uint8Array(3) }), 'lat-lon')).rejects.toThrow('neither a shapefile')
    await expect(readBytes(Uint8Array.of(0, 0, 0x27, 0x0A, 0, 0), 'lat-lon')).rejects.toThrow('Zip it')
    await expect(readBytes(zipSync({ 'a.shp': new Uint8Array(120), 'a.prj': new TextEncoder().encode('GEOGCS["GCS_WGS_1984",DATUM["D_WGS_1984",SPHEROID["WGS_1984",6378137.0,298.257223563]]]') }), 'lat-lon')).rejects.toThrow(/damaged|no area/)
    const huge = zipSync({ 'a.kml': new Uint8Array(65 * 1024 * 1024) }, { level: 0 })
    await expect(readBytes(huge, 'lat-lon')).rejects.toThrow('64 MiB')
  })
})

describe('KML and KMZ', () => {
  it.each(['outlines.kml', 'outlines.kmz'])('%s gives placemarks with their names, holes and parts', async (name) => {
    const { outlines } = await read(name)
    expect(outlines.map(outline => outline.name)).toEqual(names)
    expect(outlines.map(outline => outline.geometry)).toEqual(source.features.map(feature => feature.geometry))
  })

  it('is refused where it is another or broken XML', async () => {
    await expect(readText('<html></html>', 'lat-lon')).rejects.toThrow('“html”')
    await expect(readText('<kml><Placemark></kml>', 'lat-lon')).rejects.toThrow('not well-formed')
    await expect(readText('<kml xmlns="http://www.opengis.net/kml/2.2"><Placemark><Point><coordinates>1,2</coordinates></Point></Placemark></kml>', 'lat-lon')).rejects.toThrow('no polygon')
  })
})

describe('well-known text', () => {
  it('as GDAL writes it', async () => {
    const texts = [...new TextDecoder().decode(fixture('wkt.csv')).matchAll(/"((?:MULTI)?POLYGON[^"]*)"/g)].map(match => match[1]!)
    expect(texts).toHaveLength(2)
    const { outlines } = await readText(texts.join('\n'), 'lat-lon')
    expect(outlines.map(outline => outline.geometry)).toEqual(source.features.map(feature => feature.geometry))
  })

  it('with heights, a system, and faults by their place', () => {
    expect(looksLikeWkt('  srid=4326;polygon z((0 0 1,1 0 1,1 1 1,0 0 1))')).toBe(true)
    expect(looksLikeWkt('60.5, −45.2')).toBe(false)
    expect(readWkt('SRID=4326;POLYGON Z ((0 0 5, 1 0 5, 1e0 1 5, 0 0 5))').outlines[0]!.geometry).toEqual({ type: 'Polygon', coordinates: [[[0, 0], [1, 0], [1, 1], [0, 0]]] })
    expect(() => readWkt('SRID=3413;POLYGON ((0 0,1 0,1 1,0 0))')).toThrow('EPSG:3413')
    expect(() => readWkt('POLYGON ((0 0, 1 0,\n1 x, 0 0))')).toThrow('Line 2, column')
    expect(() => readWkt('POLYGON ((0 0, 1 0, 1 1, 0 0)')).toThrow('the end')
    expect(() => readWkt('POLYGON EMPTY')).toThrow('empty')
  })
})

describe('an outline that is written', () => {
  it.each(source.features.map(feature => [feature.properties.name, feature.geometry] as const))('comes back from each format: %s', async (name, geometry) => {
    for (const text of [outlinesAsGeoJson([{ name, geometry }]), outlinesAsKml([{ name, geometry }])]) {
      expect((await readText(text, 'lat-lon')).outlines).toEqual([{ name, geometry, attributes: { name } }])
    }
    expect((await readText(outlinesAsWkt([{ name, geometry }]), 'lat-lon')).outlines).toEqual([{ geometry }])
  })
})
