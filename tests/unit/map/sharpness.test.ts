import { describe, expect, it } from 'vitest'
import { sharpness } from '../../../app/map/picture/sharpness'

describe('dots for a pixel', () => {
  const frames = (gap: number, count: number, sharp = sharpness()) => Array.from({ length: count }, (_, k) => sharp.ratio(true, 1000 + gap * k, 2)).at(-1)!

  it('are those of the screen at rest', () => {
    const sharp = sharpness()
    frames(100, 20, sharp)
    expect(sharp.ratio(false, 5000, 2)).toBe(2)
  })

  it('become fewer while frames are slow, down to half, and more again when they are quick', () => {
    expect(frames(16, 30)).toBe(1)
    const sharp = sharpness()
    expect(frames(60, 30, sharp)).toBe(0.5)
    expect(frames(16, 60, sharp)).toBe(1)
  })

  it('do not fall because the hand had stopped', () => {
    const sharp = sharpness()
    sharp.ratio(true, 1000, 1)
    expect(sharp.ratio(true, 9000, 1)).toBe(1)
  })
})
