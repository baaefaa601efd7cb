// Makes the Earth model, reproducibly: the ocean function from Natural Earth (shared/earth/data) and the sensitivity fields
// (public/earth/fields.bin), at degree 256 some 20 s:
//   node scripts/run-ts.mjs scripts/make-earth-model.ts
import { createHash } from 'node:crypto'
import { mkdirSync, writeFileSync } from 'node:fs'
import { gzipSync } from 'node:zlib'
import { cellCoverage } from '../shared/earth/cellCoverage.ts'
import { EARTH_RADIUS_M } from '../shared/earth/constants.ts'
import { geodeticFromGeocentricDeg, squaredRadiusRatio } from '../shared/earth/latitude.ts'
import { makeFields } from '../shared/earth/makeFields.ts'
import { decodeOceanCells, encodeOceanCells, geocentricRowEdgesDeg, OCEAN_CELL_COLUMNS, OCEAN_CELL_ROWS } from '../shared/earth/oceanCells.ts'
import { ringIntegrals } from '../shared/earth/ringIntegrals.ts'
import { fieldFile } from '../shared/earth/sensitivityField.ts'
import { readLand } from './earth/land.ts'

const land = readLand()

// Exact integrals over land by contours; the sea is the rest of the sphere, over which every harmonic vanishes.
let landSr = 0
let xz = 0
let yz = 0
let p2 = 0
let x = 0
let y = 0
let z = 0
for (const ring of land.rings) {
  const integrals = ringIntegrals(ring)
  landSr += (ring.pole ? 2 * Math.PI : 0) + ring.side * integrals.areaSr
  xz -= ring.side * integrals.xz
  yz -= ring.side * integrals.yz
  p2 -= ring.side * integrals.p2
  x -= ring.side * integrals.x
  y -= ring.side * integrals.y
  z -= ring.side * integrals.z
}
const oceanSr = 4 * Math.PI - landSr

const coverage = cellCoverage(land.rings, { latEdgesDeg: geocentricRowEdgesDeg(OCEAN_CELL_ROWS), columns: OCEAN_CELL_COLUMNS })
const cells = encodeOceanCells(coverage.map(value => 1 - value))
const ellipsoid = ellipsoidMeans(coverage)
const sourceSha256 = createHash('sha256').update(land.bytes).digest('hex')
const sha256 = createHash('sha256').update(cells).digest('hex')

const head = `// Made by scripts/make-earth-model.ts from Natural Earth 1:50m land (npm world-atlas ${land.version}, land-50m.json); do not edit.\n`
writeFileSync('shared/earth/data/oceanMeans.ts', `${head}
/** Ocean function: Caspian and lakes land, ice shelves sea, coastlines mapped to geocentric latitude. Exact contour integrals. */
export const oceanMeans = {
  /** Part of the sphere that is sea. */
  fraction: ${oceanSr / (4 * Math.PI)},
  /** Area of the sea on the sphere, m². */
  areaM2: ${oceanSr * EARTH_RADIUS_M ** 2},
  /** Means over the sea of sin ψ cos ψ cos λ, sin ψ cos ψ sin λ and cos² ψ. */
  means: { xz: ${xz / oceanSr}, yz: ${yz / oceanSr}, cos2: ${2 / 3 - (2 / 3) * p2 / oceanSr} },
  /** Mean unit vector over the sea. */
  vector: { x: ${x / oceanSr}, y: ${y / oceanSr}, z: ${z / oceanSr} },
  /** The three means times r²/R², from the cells. */
  ellipsoidMeans: { xz: ${ellipsoid.xz}, yz: ${ellipsoid.yz}, cos2: ${ellipsoid.cos2} },
  sourceSha256: '${sourceSha256}',
  /** SHA-256 of the encoded cells. */
  sha256: '${sha256}'
} as const
`)
writeFileSync('shared/earth/data/oceanCells.ts', `${head}
/** Sea as part of each cell, ${OCEAN_CELL_ROWS} × ${OCEAN_CELL_COLUMNS} cells of ${180 / OCEAN_CELL_ROWS}° in geocentric latitude and longitude; see ../oceanCells.ts for the code. */
export const oceanCellsBase64 = '${cells}'
`)
console.log(`sea ${oceanSr / (4 * Math.PI)} of the sphere; encoded cells ${cells.length} characters`)

const { header, payload } = makeFields(decodeOceanCells(cells), { degree: 256, stepDeg: 0.5, oceanSha256: sha256 })
const file = fieldFile(header, gzipSync(payload, { level: 9 }))
mkdirSync('public/earth', { recursive: true })
writeFileSync('public/earth/fields.bin', file)
console.log(`sensitivity fields ${header.payloadSha256}: ${file.length} bytes`)

/** Means over the sea of sin ψ cos ψ cos λ, sin ψ cos ψ sin λ, cos² ψ times r²/R², by the middles of the cells. */
function ellipsoidMeans(land: Float64Array): { xz: number, yz: number, cos2: number } {
  const sum = { area: 0, xz: 0, yz: 0, cos2: 0 }
  for (let row = 0; row < OCEAN_CELL_ROWS; row++) {
    const psi = (row + 0.5 - OCEAN_CELL_ROWS / 2) * Math.PI / OCEAN_CELL_ROWS
    const squared = squaredRadiusRatio(geodeticFromGeocentricDeg(psi * 180 / Math.PI))
    for (let column = 0; column < OCEAN_CELL_COLUMNS; column++) {
      const lambda = -Math.PI + (column + 0.5) * 2 * Math.PI / OCEAN_CELL_COLUMNS
      const w = Math.cos(psi) * (1 - land[row * OCEAN_CELL_COLUMNS + column]!)
      sum.area += w
      sum.xz += w * squared * Math.sin(psi) * Math.cos(psi) * Math.cos(lambda)
      sum.yz += w * squared * Math.sin(psi) * Math.cos(psi) * Math.sin(lambda)
      sum.cos2 += w * squared * Math.cos(psi) ** 2
    }
  }
  return { xz: sum.xz / sum.area, yz: sum.yz / sum.area, cos2: sum.cos2 / sum.area }
}
