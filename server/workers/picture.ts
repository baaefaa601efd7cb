import { Resvg } from '@resvg/resvg-js'
import { pictureSheet, type RunMap } from '../services/report/mapPicture'

export interface PictureTask { map: RunMap, fonts: string[] }

/** A run's map as PNG, drawn with the fonts named and no other. */
export default function picture({ map, fonts }: PictureTask): Uint8Array {
  const font = { loadSystemFonts: false, fontFiles: fonts, defaultFontFamily: 'Noto Sans' }
  return new Uint8Array(new Resvg(pictureSheet(map), { font }).render().asPng())
}
