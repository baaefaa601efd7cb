/** Hatch at 45° for mass lost, as on every figure: one tile of `size` × `size` pixels, without premultiplied alpha. */
export function hatchImage(colour: string, size = 12, stroke = 2): { width: number, height: number, data: Uint8ClampedArray } {
  const [r, g, b] = [1, 3, 5].map(at => Number.parseInt(colour.slice(at, at + 2), 16)) as [number, number, number]
  const data = new Uint8ClampedArray(4 * size * size)
  for (let y = 0; y < size; y++) {
    for (let x = 0; x < size; x++) {
      // Distance from the nearest of the lines x + y = 0, size, 2·size, in pixels along x.
      const along = (x + y + 1) % size
      const distance = Math.min(along, size - along) / Math.SQRT2
      const cover = Math.max(0, Math.min(1, stroke / 2 + 0.5 - distance))
      data.set([r, g, b, Math.round(170 * cover)], 4 * (y * size + x))
    }
  }
  return { width: size, height: size, data }
}
