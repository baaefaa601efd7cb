import type { Outline } from '#shared/types/domain'

/**
 * Outlines travel with a page as text: the page's own form names every number and every pair of numbers apart, several times as long
 * and slow to read back for regions of many vertices.
 */
export default definePayloadPlugin(() => {
  definePayloadReducer('Outline', (value: unknown) => isOutline(value) && JSON.stringify(value))
  definePayloadReviver('Outline', (text: string) => JSON.parse(text) as Outline)
})

function isOutline(value: unknown): value is Outline {
  const { type, coordinates } = (typeof value === 'object' && value !== null ? value : {}) as Partial<Outline>
  return (type === 'Polygon' || type === 'MultiPolygon') && Array.isArray(coordinates)
}
