import { describe, expect, it } from 'vitest'
import { parsePlace } from '../../../shared/geo/parseCoordinates.ts'
import { InputError } from '../../../shared/types/issue.ts'

describe('parsePlace', () => {
  it.each([
    ['51.5, −0.12', [-0.12, 51.5]],
    ['40°42′46″N 74°00′22″W', [-(74 + 22 / 3600), 40 + 42 / 60 + 46 / 3600]],
    ['  -33.9 18.4 ', [18.4, -33.9]],
    ['18.4E 33.9S', [18.4, -33.9]],
    ['10, 350', [-10, 10]],
    ['10, -190', [170, 10]],
    ['0, 180', [180, 0]],
  ])('reads %s', (text, [lon, lat]) => {
    const [x, y] = parsePlace(text)
    expect(x).toBeCloseTo(lon!, 9)
    expect(y).toBeCloseTo(lat!, 9)
  })

  it.each([
    ['', /Two coordinates are wanted/],
    ['Lisbon', /Two coordinates are wanted/],
    ['51.5', /Two coordinates are wanted/],
    ['120, 20', /Latitude 120° is outside.*Is the order longitude, latitude\?/],
    ['10N 20N', /letter of the same kind/],
    ['10, 400', /whole turn/],
  ])('refuses “%s” with the reason', (text, reason) => {
    expect(() => parsePlace(text)).toThrow(InputError)
    expect(() => parsePlace(text)).toThrow(reason)
  })
})
