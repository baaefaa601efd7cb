import { formatScientific } from '#shared/format/numbers'
import type { EarthModel } from '#shared/earth/earthModel'
import type { Outline } from '#shared/types/domain'
import { outlineEffect } from './outlineEffect'

/** What the server found for a stored outline: area and, per gigatonne gained, the day (µs) and the pole (mas). */
export interface ServerFigures {
  areaKm2: number
  ocean: string
  lodMicroseconds: number
  chi1Mas: number
  chi2Mas: number
  /** Those of the pattern of a grid, and not of an even spread. */
  patterned?: boolean
}

/** The largest that a gigatonne can do with the sea spread evenly (Gross): differences are parts of these, never of a component that may vanish. */
const scale = { lodMicroseconds: 0.0254, chiMas: 0.0185 }
/** Browser and server round the last bit of a sine or a power differently. */
const tolerance = 1e-9

/** Largest difference between browser and server, as a part of the area and of the largest effect. */
export function differenceOf(outline: Outline, model: EarthModel, server: ServerFigures): number {
  const mine = outlineEffect(outline, model)
  return Math.max(
    Math.abs(mine.areaKm2 / server.areaKm2 - 1),
    Math.abs(mine.lodMicroseconds + server.lodMicroseconds) / scale.lodMicroseconds,
    Math.abs(mine.chi1Mas + server.chi1Mas) / scale.chiMas,
    Math.abs(mine.chi2Mas + server.chi2Mas) / scale.chiMas
  )
}

/** A sentence on whether the server's figures are those that were shown while drawing, and if not, why. */
export function agreementWords(outline: Outline, model: EarthModel, server: ServerFigures): { agrees: boolean, text: string } {
  if (model.defaultOcean !== server.ocean) {
    return { agrees: false, text: 'Stored. The sensitivity fields could not be read in this browser, so its figures were for another response of the ocean than the server’s. The server’s figures stand.' }
  }
  const difference = differenceOf(outline, model, server)
  if (difference <= tolerance) return { agrees: true, text: 'Stored. The server computed area and effects anew and agrees with what was shown here to one part in 10⁹.' }
  if (server.patterned) {
    return { agrees: true, text: 'Stored. The server’s figures are those of the pattern of the region’s grid, where those shown here spread the mass evenly. The server’s figures stand.' }
  }
  return {
    agrees: false,
    text: `Stored. The server’s figures differ from those shown here by ${formatScientific(difference)} of the largest effect: this page was loaded with another version of the Earth model. The server’s figures stand; load the page anew.`,
  }
}
