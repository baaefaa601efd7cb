import { readFileSync } from 'node:fs'
import { geoContains } from 'd3-geo'
import { describe, expect, it } from 'vitest'
import { placeNames } from '../../../app/map/placeNames'
import { landOf } from '../../../shared/figures/map/land.ts'

const { features } = placeNames()
const land = landOf(JSON.parse(readFileSync('node_modules/world-atlas/land-50m.json', 'utf8')))
const onLand = (coordinates: number[]) => geoContains(land, [coordinates[0]!, coordinates[1]!])

describe('names on the map', () => {
  it('stand inside the tiles, each once', () => {
    expect(new Set(features.map(({ properties }) => properties.name)).size).toBe(features.length)
    for (const { geometry: { coordinates: [lon, lat] } } of features) {
      expect(Math.abs(lon!)).toBeLessThanOrEqual(180)
      expect(Math.abs(lat!)).toBeLessThan(85)
    }
  })

  // Natural Earth's coast at 1:50m (world-atlas) knows nothing of our list.
  it.each(features.filter(({ properties }) => ['ocean', 'sea'].includes(properties.kind)).map(f => [f.properties.name, f.geometry.coordinates] as const))('%s lies at sea', (_, place) => {
    expect(onLand(place)).toBe(false)
  })
  it.each(features.filter(({ properties }) => ['continent', 'river'].includes(properties.kind)).map(f => [f.properties.name, f.geometry.coordinates] as const))('%s lies on land', (_, place) => {
    expect(onLand(place)).toBe(true)
  })
})
