import { print } from '#shared/design/tokens'
import { secularNote } from '#shared/figures/series/secular'
import { formatSpan } from '#shared/format/numbers'
import { cautions } from '#shared/text/cautions'
import { findingSentence, remainderSentences } from '#shared/text/finding'
import { settingsLine } from '#shared/text/method'
import { reportBudget } from './budget'
import { reportBeam, reportChart, reportDrift } from './figures'
import { drawMap, runMap } from './mapPicture'
import { derivedBlocks, modelUncertaintyBlocks } from './physics'
import { cautionBlocks, comparisonBlocks, methodBlocks, overlapBlocks, recordBlocks, runningFoot, runningHead, sourceBlocks, withdrawalBlocks } from './sections'
import { caution, figure, page, paragraph, sectionHead, size, together } from './style'
import type { Block, ReportData } from './types'

/** The report as the PDF writer takes it: the finding and the map first, then figures, budget, comparison, method and record. */
export function reportDocument(data: ReportData): Block {
  const { result, comparison, scenarioName, workspaceName, runNumber, invented } = data
  const finding = findingSentence(result)
  const span = formatSpan(result.span.fromMjd, result.span.toMjd)
  const overTime = comparison ? `observed, model and residual; ${comparison.reduction?.chartNote ?? 'trend left in'}` : 'model with one sigma; trend left in'
  const content: Block[] = [
    ...withdrawalBlocks(data),
    { text: finding, fontSize: size.head, bold: true, lineHeight: 1.15, margin: [0, 10, 0, 8] },
    paragraph(`${workspaceName}. Scenario “${scenarioName}”, run ${runNumber}: ${settingsLine(result.settings)}. Calculated, not observed.${invented ? ' Invented data.' : ''}`, { color: print.soft }),
    ...(comparison ? remainderSentences(comparison).map(text => paragraph(text)) : []),
    together(sectionHead('Regions', `mass change ${span}`), figure(drawMap(runMap(data)))),
    caution(cautions.core),
    caution(cautions.legal),

    together(sectionHead('Length of day', 'what each region adds, µs per year'), figure(reportBeam(data))),
    ...overlapBlocks(data),
    reportBudget(data, sectionHead('Budget', `trends per Julian year, ${span}, with one sigma`)),
    together(sectionHead('Length of day over time', overTime), figure(reportChart(data, 'lod'))),

    together(sectionHead('Pole', 'drift in mas per year, head to tail, seen from above the north pole'), figure(reportDrift(data), 400)),
    together(sectionHead('Excitation of the pole towards 0°, χ₁', overTime), figure(reportChart(data, 'chi1'))),
    together(sectionHead('Excitation of the pole towards 90° E, χ₂', overTime), figure(reportChart(data, 'chi2'))),
    ...(comparison?.chi2 && comparison.from !== 'gravity' ? [paragraph(secularNote, { color: print.soft, fontSize: size.small })] : []),

    ...comparisonBlocks(data),
    ...derivedBlocks(data),
    ...modelUncertaintyBlocks(data),
    ...methodBlocks(data),
    ...sourceBlocks(data),
    ...cautionBlocks(data),
    ...recordBlocks(data),
  ]
  return {
    content,
    pageSize: 'A4',
    pageMargins: [page.margin.left, page.margin.top, page.margin.right, page.margin.bottom],
    header: (pageNumber: number) => runningHead(data, pageNumber),
    footer: (pageNumber: number, pages: number) => runningFoot(data, pageNumber, pages),
    defaultStyle: { font: 'Noto Sans', fontSize: size.body, color: print.ink },
    language: 'en',
    info: {
      title: finding,
      author: data.preparedBy,
      subject: `${workspaceName}: ${scenarioName}, run ${runNumber}${invented ? ' (invented data)' : ''}`,
      keywords: data.runHash,
      creator: `Counterpoise ${result.engineVersion}`,
      // The moment of the run and not that of printing, so that the same run gives the same bytes.
      creationDate: new Date(data.preparedAt),
    },
  }
}
