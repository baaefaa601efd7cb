import pdfmakeModule from 'pdfmake'
import { runtimeFile } from '../../utils/runtimeFiles'
import { reportDocument } from './document'
import type { Block, ReportData, ReportFonts } from './types'

export type { ReportData, ReportFonts } from './types'

/** What is used of pdfmake 0.3, whose published types are those of 0.2. */
interface Pdfmake {
  setFonts(fonts: Record<string, Record<string, string>>): void
  setUrlAccessPolicy(allows: (url: string) => boolean): void
  setLocalAccessPolicy(allows: (path: string) => boolean): void
  createPdf(document: Block): { getBuffer(): Promise<Uint8Array> }
}
const pdfmake = pdfmakeModule as unknown as Pdfmake

/** The fonts that are laid beside the built server. */
function shippedFonts(): ReportFonts {
  return {
    normal: runtimeFile('fonts', 'NotoSans_400Regular.ttf'),
    bold: runtimeFile('fonts', 'NotoSans_600SemiBold.ttf'),
    italics: runtimeFile('fonts', 'NotoSans_400Regular_Italic.ttf'),
  }
}

/** A run as a PDF with embedded fonts and vector figures. The same data give the same bytes; nothing is fetched. */
export async function reportPdf(data: ReportData, fonts: ReportFonts = shippedFonts()): Promise<Uint8Array> {
  const files = new Set(Object.values(fonts))
  pdfmake.setFonts({ 'Noto Sans': { ...fonts, bolditalics: fonts.bold } })
  pdfmake.setUrlAccessPolicy(() => false)
  pdfmake.setLocalAccessPolicy(path => files.has(path))
  return pdfmake.createPdf(reportDocument(data)).getBuffer()
}
