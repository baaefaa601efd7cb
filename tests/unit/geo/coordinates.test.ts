import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { parseAngle } from '../../../shared/geo/parseAngle.ts'
import { parseCoordinates } from '../../../shared/geo/parseCoordinates.ts'
import type { InputError } from '../../../shared/types/issue.ts'

const refused = (text: string): InputError => {
  try {
    parseCoordinates(text)
  }
  catch (error) {
    return error as InputError
  }
  throw new Error('was not refused')
}

describe('parseAngle', () => {
  it('reads decimals, letters and degrees, minutes, seconds', () => {
    const cases: [string, number, 'lat' | 'lon' | null][] = [
      ['51.5', 51.5, null], ['−0.12', -0.12, null], ['+7', 7, null], ['.5', 0.5, null], ['51,5', 51.5, null],
      ['51.5N', 51.5, 'lat'], ['S 33.25', -33.25, 'lat'], ['0.12° W', -0.12, 'lon'], ['e12', 12, 'lon'],
      ['51°30′00″N', 51.5, 'lat'], ['0° 7\' 12" W', -0.12, 'lon'], ['51 30 0 n', 51.5, 'lat'], ['70:15:36', 70.26, null],
      ['-70°15′36″', -70.26, null], ['12d30m', 12.5, null], ['12°30.5′ S', -12.508333333333333, 'lat']
    ]
    for (const [text, degrees, axis] of cases) {
      expect(parseAngle(text)?.degrees, text).toBeCloseTo(degrees, 12)
      expect(parseAngle(text)?.axis, text).toBe(axis)
    }
  })

  it('refuses what is not an angle', () => {
    for (const text of ['', 'north', '51.5.2', '12°61′', '12°10′60″', '1.5°30′', 'N 12 S', '-12 N', '12 13 14 15', '1e3']) {
      expect(parseAngle(text), text).toBeNull()
    }
  })

  it('reads back what it would write', () => {
    fc.assert(fc.property(fc.integer({ min: -324_000, max: 324_000 }), (tenths) => {
      const size = Math.abs(tenths)
      const text = `${Math.floor(size / 3600)}°${Math.floor(size / 60) % 60}′${size % 60}″${tenths < 0 ? 'S' : 'N'}`
      expect(parseAngle(text)!.degrees).toBeCloseTo(tenths / 3600, 12)
    }), { numRuns: 300, seed: 1 })
  })
})

describe('parseCoordinates', () => {
  const expected = [[-10, 40], [5.5, 41.25], [0, 45], [-10, 40]]

  it('reads lines as people keep them', () => {
    for (const text of [
      '40, -10\n41.25, 5.5\n45, 0',
      '40 −10\r\n41.25 5.5\r\n45 0',
      '40N 10W\n41.25N 5.5E\n45N 0E',
      'N40 W10\nN41.25 E5.5\nN45 E0',
      '40°N, 10°W\n41°15′N, 5°30′E\n45°00′00″N, 0°00′00″E',
      '40°N 10°W\n41°15′N 5°30′E\n45°00′00″N 0°00′00″E',
      '10W 40N\n5.5E 41.25N\n0E 45N',
      '(40, -10)\n(41.25, 5.5)\n(45, 0)\n(40, -10)',
      'lon; lat\n-10; 40\n5,5; 41,25\n0; 45',
      '# corners\n\nLatitude\tLongitude\n40\t-10\n41.25\t5.5\n45\t0\n',
      '40 00 00 -10 00 00\n41 15 00 5 30 00\n45 0 0 0 0 0'
    ]) {
      expect(parseCoordinates(text).ring, text).toEqual(expected)
    }
  })

  it('takes the order from the option, and from a header before it', () => {
    expect(parseCoordinates('-10 40\n5.5 41.25\n0 45', { order: 'lon-lat' }).ring).toEqual(expected)
    expect(parseCoordinates('lat,lon\n40,-10\n41.25,5.5\n45,0', { order: 'lon-lat' })).toEqual({ ring: expected, order: 'lat-lon' })
  })

  it('lists every bad row with its number and reason', () => {
    const error = refused('40, -10\nforty, ten\n\n100, 20\n40N 41N\n12, 400\n1 2 3')
    expect(error.issues.map(issue => issue.row)).toEqual([2, 4, 5, 6, 7])
    expect(error.issues[1]!.message).toBe('Latitude 100° is outside −90° to 90°. Is the order longitude, latitude?')
    expect(error.issues[2]!.message).toContain('letter of the same kind')
    expect(error.issues[3]!.message).toContain('more than a whole turn')
    expect(refused('1, 2\n3, x\n4, 5').message).toMatch(/^Row 2: Two coordinates are wanted/)
    expect(error.message).toBe('5 rows do not read as coordinates.')
  })

  it('wants three places', () => {
    expect(refused('1, 2\n3, 4\n1, 2').message).toBe('An outline needs at least three places; there are 2 here.')
    expect(refused('').message).toContain('there are 0 here')
  })
})
