import type { Palette } from '#shared/design/tokens'
import { regionKinds } from '#shared/types/domain'
import { hatchImage } from '../hatchImage'
import { kindPattern, lossHatch, modelHatch } from './colouring'
import { kindPaths, patternImage } from './kindPatterns'

/** Overlapping ground: hatched the other way, over whatever lies below. */
export const overlapHatch = 'hatch-overlap'

/** Every image of the map by its name, in the colours of a theme. */
export function mapImages(palette: Palette): [string, ReturnType<typeof hatchImage>][] {
  return [
    [lossHatch, hatchImage(palette.loss)],
    [modelHatch, hatchImage(palette.model)],
    [overlapHatch, patternImage('M-1 -1L9 9M-1 7L1 9M7 -1L9 1M-1 9L9 -1M-1 1L1 -1M7 9L9 7', palette.ink)],
    ...regionKinds.map((kind): [string, ReturnType<typeof hatchImage>] => [kindPattern(kind), patternImage(kindPaths[kind], palette.ink)]),
  ]
}
