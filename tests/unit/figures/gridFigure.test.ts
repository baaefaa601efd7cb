import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { classesOf } from '../../../shared/figures/map/gridClasses.ts'
import { gridFigure, type GridCells } from '../../../shared/figures/map/gridFigure.ts'
import { landOf } from '../../../shared/figures/map/land.ts'
import { box } from '../grids/gridFixtures.ts'
import { expectSound } from './expectSound.ts'

const land = landOf(JSON.parse(readFileSync('node_modules/world-atlas/land-110m.json', 'utf8')))
const cells = (south: number, north: number, westDeg: number, columns: number, step: number): GridCells => {
  const rows = Math.round((north - south) / step)
  return {
    latEdgesDeg: Array.from({ length: rows + 1 }, (_, i) => south + i * step), westDeg, stepDeg: step, columns,
    values: Array.from({ length: rows * columns }, (_, i) => i % 11 === 0 ? null : Math.sin(i / 7) * 30),
  }
}

describe('classes of heights', () => {
  it('are equal on both sides of zero by a round step, the outermost open', () => {
    const classes = classesOf([-38, -10, 0, 4, null])
    expect(classes.bounds).toEqual([-30, -20, -10, 0, 10, 20, 30])
    expect([-1e9, -25, -0.1, 0, 0.1, 25, 1e9, null].map(classes.of)).toEqual([0, 1, 3, 4, 4, 6, 7, null])
    expect(classesOf([0.08]).decimals).toBe(2)
    expect(classesOf([]).bounds[3]).toBe(0)
  })
})

describe('a month of a grid on the map', () => {
  it.each([['the world', cells(-90, 90, -180, 72, 5)], ['the world from 0°', cells(-90, 90, 0, 72, 5)], ['a region', cells(20, 40, -10, 30, 1)], ['across the date line', cells(-30, -10, 170, 20, 1)], ['about the pole', cells(-90, -60, 0, 72, 5)]] as const)('is sound for %s', (_, grid) => {
    for (const width of [300, 700]) {
      const figure = gridFigure({ cells: grid, unit: 'cm', regions: [{ name: 'Invented', geometry: box(0, 22, 9, 30) }], land, title: 'Heights' }, { width, theme: 'light', id: 'g' })
      expectSound(figure)
      expect(figure.svg).toContain('clip-path="url(#g-frame)"')
      expect(figure.svg).not.toContain('NaN')
    }
  })
})
