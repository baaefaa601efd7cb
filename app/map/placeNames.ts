import type { Feature, FeatureCollection, Point } from 'geojson'

export type PlaceClass = 'ocean' | 'sea' | 'continent' | 'ice' | 'lake' | 'river'

/** Names in the usual English form, where they may stand; `from` is the zoom at which one first shows. */
type Place = readonly [name: string, lon: number, lat: number, from?: number]

const oceans: Place[] = [
  ['Arctic Ocean', -165, 79], ['North Atlantic Ocean', -42, 30], ['South Atlantic Ocean', -15, -28], ['Indian Ocean', 78, -24],
  ['North Pacific Ocean', -160, 28], ['South Pacific Ocean', -128, -34], ['Southern Ocean', 100, -61],
]
const continents: Place[] = [
  ['Africa', 20, 8], ['Antarctica', 60, -79], ['Asia', 92, 47], ['Australia', 134, -25], ['Europe', 20, 50.5], ['North America', -101, 46], ['South America', -59, -12],
]
const ice: Place[] = [
  ['Greenland Ice Sheet', -40, 73, 1.2], ['West Antarctic Ice Sheet', -108, -79, 1.6], ['East Antarctic Ice Sheet', 92, -76, 1.6],
  ['Ross Ice Shelf', -176, -81.3, 2.6], ['Filchner–Ronne Ice Shelf', -60, -79.5, 2.6], ['Vatnajökull', -16.8, 64.4, 4], ['Austfonna', 24, 79.8, 4],
  ['Severny Island Ice Cap', 61.5, 75.8, 4], ['Southern Patagonian Ice Field', -73.5, -49.5, 4], ['Devon Ice Cap', -82, 75.3, 4],
]
const seas: Place[] = [
  ['Mediterranean Sea', 18, 34.6, 1.6], ['Caribbean Sea', -75, 15, 1.6], ['Gulf of Mexico', -90, 25, 1.8], ['Hudson Bay', -85, 60, 1.6], ['Baffin Bay', -67, 74, 2.4],
  ['Labrador Sea', -54, 58, 2.2], ['Greenland Sea', -5, 77, 2.2], ['Norwegian Sea', 2, 68, 2], ['Barents Sea', 40, 75, 2], ['Kara Sea', 70, 75.5, 2.4],
  ['Laptev Sea', 125, 76, 2.4], ['East Siberian Sea', 163, 73, 2.4], ['Beaufort Sea', -138, 73, 2.2], ['Bering Sea', -178, 58, 1.8], ['Gulf of Alaska', -145, 57, 2.2],
  ['Sea of Okhotsk', 150, 54, 2], ['Sea of Japan', 135, 40, 2.4], ['East China Sea', 125, 29, 2.6], ['South China Sea', 114, 14, 1.8], ['Philippine Sea', 134, 18, 1.8],
  ['Bay of Bengal', 88, 14, 1.8], ['Arabian Sea', 64, 15, 1.6], ['Red Sea', 38, 20.5, 2.6], ['Black Sea', 34.5, 43.2, 2.4], ['North Sea', 3, 56.5, 2.6], ['Baltic Sea', 19.5, 57, 3],
  ['Tasman Sea', 160, -38, 1.8], ['Coral Sea', 155, -17, 1.8], ['Weddell Sea', -45, -72, 2], ['Ross Sea', -175, -75.5, 2], ['Amundsen Sea', -112, -72.5, 2.4],
  ['Scotia Sea', -45, -57.5, 2.4], ['Gulf of Guinea', 3, 1.5, 2.2], ['Mozambique Channel', 41, -19, 3], ['Persian Gulf', 51.5, 27, 3.2], ['Andaman Sea', 96, 10.5, 3],
]
const lakes: Place[] = [
  ['Caspian Sea', 50.8, 41.6, 1.8], ['Aral Sea', 59, 45, 3], ['Lake Superior', -87.6, 47.7, 2.8], ['Lake Michigan', -87, 43.9, 3.4], ['Lake Huron', -82.4, 44.8, 3.4], ['Lake Erie', -81.2, 42.2, 4],
  ['Lake Ontario', -77.8, 43.65, 4], ['Great Bear Lake', -121, 66, 3], ['Great Slave Lake', -114, 61.7, 3], ['Lake Winnipeg', -97.7, 52.3, 3.6], ['Lake Victoria', 33, -1, 2.8],
  ['Lake Tanganyika', 29.6, -6.2, 3.2], ['Lake Malawi', 34.5, -12, 3.2], ['Lake Turkana', 36.1, 3.6, 4], ['Lake Chad', 14.1, 13.1, 4], ['Lake Baikal', 108, 53.5, 2.8], ['Lake Balkhash', 74.5, 46.4, 3.6],
  ['Lake Ladoga', 31.5, 60.8, 3.6], ['Lake Onega', 35.4, 61.7, 4], ['Lake Titicaca', -69.4, -15.8, 3.6], ['Lake Volta', 0, 7.4, 4.4], ['Qinghai Lake', 100.2, 36.9, 4.2], ['Issyk-Kul', 77.3, 42.45, 4.2],
]
const rivers: Place[] = [
  ['Amazon', -58.3, -3, 2.6], ['Orinoco', -65.3, 7.7, 3.6], ['Paraná', -58.5, -27.4, 3.2], ['Mississippi', -91.2, 34, 2.8], ['Missouri', -101, 46.6, 3.6], ['Colorado', -112.5, 36.2, 3.6], ['Columbia', -119.6, 46, 4],
  ['Mackenzie', -125, 64.8, 3], ['Yukon', -156, 64.8, 3], ['Nile', 31, 26.8, 2.6], ['Niger', -3, 16.6, 3], ['Congo', 19.5, 1.9, 2.6], ['Zambezi', 29.5, -16.2, 3.2], ['Orange', 19.5, -28.7, 4],
  ['Danube', 21, 45, 3.2], ['Volga', 46.5, 50.5, 2.8], ['Ob', 67.5, 63, 2.8], ['Yenisey', 88.5, 65, 2.8], ['Lena', 124.5, 67, 2.8], ['Amur', 131, 48.2, 3], ['Yellow River', 110.6, 39.8, 3.4], ['Yangtze', 116, 30.2, 2.8],
  ['Mekong', 104.8, 17.2, 3.2], ['Ganges', 84.2, 25.6, 2.9], ['Brahmaputra', 93, 26.6, 3.6], ['Indus', 69.2, 28.4, 2.9], ['Euphrates', 41, 34.6, 3.6], ['Tigris', 44.4, 33.8, 4], ['Irrawaddy', 95.5, 19.5, 3.8],
  ['Murray', 142.2, -34.4, 3.2], ['Darling', 144.6, -30.6, 4],
]

/** Which name gives way where two would meet: the lowest number stays. */
const classes: { kind: PlaceClass, from: number, places: Place[] }[] = [
  { kind: 'ocean', from: -2, places: oceans }, { kind: 'continent', from: 0.4, places: continents }, { kind: 'ice', from: 1.2, places: ice },
  { kind: 'sea', from: 1.6, places: seas }, { kind: 'lake', from: 2.8, places: lakes }, { kind: 'river', from: 2.6, places: rivers },
]

export interface PlaceProperties { name: string, kind: PlaceClass, from: number, rank: number }

/** Names of oceans, continents, ice, seas, lakes and rivers: our own short list, placed by hand. Inside ±85°, where the map ends. */
export function placeNames(): FeatureCollection<Point, PlaceProperties> {
  return {
    type: 'FeatureCollection',
    features: classes.flatMap(({ kind, from: first, places }, rank) => places.map(([name, lon, lat, from = first]): Feature<Point, PlaceProperties> => (
      { type: 'Feature', properties: { name, kind, from, rank: 10 * rank + from }, geometry: { type: 'Point', coordinates: [lon, lat] } }
    ))),
  }
}
