// Makes the map's vector tiles, and the land that outlines are snapped to and cut by, from Natural Earth, the same bytes every time:
//   node scripts/run-ts.mjs scripts/make-tiles.ts
import { createHash } from 'node:crypto'
import { mkdirSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { packLand } from '../shared/geo/landFile.ts'
import { readLandShapes } from './tiles/land.ts'
import { deepestZoom, makeTiles } from './tiles/tiles.ts'

const folder = join(process.cwd(), 'public', 'tiles')
const shapes = readLandShapes()
const hash = createHash('sha256')
let count = 0
let size = 0
for (let z = 0; z <= deepestZoom; z++) rmSync(join(folder, String(z)), { recursive: true, force: true })
for (const { z, x, y, bytes } of makeTiles(shapes)) {
  mkdirSync(join(folder, String(z), String(x)), { recursive: true })
  writeFileSync(join(folder, String(z), String(x), `${y}.pbf`), bytes)
  hash.update(`${z}/${x}/${y} ${createHash('sha256').update(bytes).digest('hex')}\n`)
  count++
  size += bytes.length
}
const source = `Natural Earth 1:50m land, npm world-atlas ${shapes.version}, land-50m.json`
writeFileSync(join(folder, 'land.json'), packLand(shapes.land, source))
writeFileSync(join(folder, 'manifest.json'), `${JSON.stringify({
  source,
  sourceSha256: shapes.sha256,
  zooms: [0, deepestZoom],
  tiles: count,
  bytes: size,
  sha256: hash.digest('hex')
}, null, 2)}\n`)
console.log(`${count} tiles, ${size} bytes`)
