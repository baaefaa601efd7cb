import { element } from './svg.ts'

/**
 * Definition of a hatch at 45°, the sign of mass lost wherever an area is filled, so that loss and gain differ without
 * colour.
 */
export function hatch(id: string, colour: string, options: { pitch?: number, stroke?: number, opacity?: number } = {}): string {
  const pitch = options.pitch ?? 5
  const line = element('path', {
    'd': `M${-pitch / 4},${pitch / 4}L${pitch / 4},${-pitch / 4}M0,${pitch}L${pitch},0M${pitch * 0.75},${pitch * 1.25}L${pitch * 1.25},${pitch * 0.75}`,
    'stroke': colour,
    'stroke-width': options.stroke ?? 1,
    'stroke-opacity': options.opacity,
  })
  return element('pattern', { id, width: pitch, height: pitch, patternUnits: 'userSpaceOnUse' }, line)
}
