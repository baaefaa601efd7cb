import { formatArea, formatDate, formatInstant, formatMeasured, formatNumber, formatShare, formatSpan } from '#shared/format/numbers'
import { print } from '#shared/design/tokens'
import { titleOfChain } from '#shared/observed/readChain'
import { cautions, cautionsFor } from '#shared/text/cautions'
import { constantRows } from '#shared/text/constants'
import { methodSections, settingsLine } from '#shared/text/method'
import { massOnGround, namedPairs, settledSentence, sharedGround, unsettledNote } from '#shared/text/overlaps'
import { factRows } from '#shared/text/seriesFacts'
import { patternSentences } from '#shared/text/gridPattern'
import { waterWaySentences } from '#shared/text/waterWay'
import { listed } from '#shared/text/words'
import { caution, page, paragraph, sectionHead, size, textTable, together } from './style'
import type { ComparisonQuantity } from '#shared/types/run'
import type { Block, ReportData } from './types'

/** Overlaps and warnings, before any sum. Nothing where there are none. */
export function overlapBlocks({ result }: ReportData): Block[] {
  const overlaps = namedPairs(result).map(pair => [sharedGround(pair), massOnGround(pair), settledSentence(pair) ?? unsettledNote].filter(Boolean).join(' '))
  const messages = result.warnings.filter(warning => warning.code !== 'overlap').map(warning => warning.message)
  const [first, ...rest] = [...overlaps, ...messages].map(text => caution(text))
  return first ? [together(sectionHead('Before the sum', 'overlaps and warnings'), first), ...rest] : []
}

/** Trends side by side with their errors and noise, what is still in the observed series, and the cautions that belong to it. */
export function comparisonBlocks(data: ReportData): Block[] {
  const { comparison, observed } = data
  if (!comparison) return []
  const row = (name: string, unit: string, quantity: ComparisonQuantity | null, factor: number): string[][] => {
    if (!quantity) return []
    const { trends, r1 } = quantity
    const trend = (which: keyof typeof trends) => formatMeasured(trends[which].value * factor, trends[which].sigma * factor).text
    const rms = (value: number) => formatMeasured(value * factor, null, { signed: false }).value
    return [[
      `${name}, ${unit}`, trend('observed'), trend('model'), trend('residual'),
      `${formatNumber(r1.observed, 2)} / ${formatNumber(r1.model, 2)} / ${formatNumber(r1.residual, 2)}`,
      `${rms(quantity.rmsObserved)} / ${rms(quantity.rmsResidual)}`,
    ]]
  }
  const rows = [...row('Length of day', 'µs per year', comparison.lod, 1000), ...row('χ₁', 'mas per year', comparison.chi1, 1), ...row('χ₂', 'mas per year', comparison.chi2, 1)]
  return [
    textTable({
      head: sectionHead('Comparison with observation', `${formatSpan(comparison.span.fromMjd, comparison.span.toMjd)}, monthly means`),
      columns: ['Trend', 'observed', 'model', 'residual', 'r₁ obs. / mod. / res.', 'RMS obs. / res., µs or mas'],
      rows,
      widths: ['*', 'auto', 'auto', 'auto', 'auto', 'auto'],
      right: [1, 2, 3, 4, 5],
    }),
    ...(observed ? [paragraph(`Observed series: ${observed.name}. ${observed.source}`, { margin: [0, 6, 0, 0], fontSize: size.small, color: print.soft })] : []),
    ...(comparison.notRemoved.length ? [together(paragraph(`Still in the observed series: ${listed(comparison.notRemoved)}.`, { margin: [0, 6, 0, 4] }))] : []),
    caution(cautions.core),
    caution(cautions.noise),
    ...reductionBlocks(data),
  ]
}

/** The chain that reduced the observed series: its name, what each step did, and the chain itself as JSON, to be used again. */
export function reductionBlocks({ comparison }: ReportData): Block[] {
  const reduction = comparison?.reduction
  if (!reduction) return []
  const [first, ...rest] = reduction.steps.map(({ sentence, source }, i): Block => ({ text: [`${i + 1}. ${sentence} `, { text: source, color: print.soft }], margin: [0, 0, 0, 3] }))
  return [
    together(sectionHead('Reduction of the observed series', `${titleOfChain(reduction)}; ${reduction.chartNote}`), first ?? paragraph('Nothing is taken away.')),
    ...rest,
    paragraph('The same chain as JSON, to be used again:', { margin: [0, 4, 0, 2], fontSize: size.small, color: print.soft }),
    // A break after every value: one long word would not be broken.
    { text: JSON.stringify(reduction.chain, null, 1).replace(/\n\s*/g, ' '), fontSize: size.tiny, color: print.soft },
  ]
}

export function methodBlocks({ result, comparison }: ReportData): Block[] {
  const { settings } = result
  const [first, ...rest] = methodSections(settings, comparison !== null).map(({ heading, text }): Block => ({
    text: [{ text: `${heading}. `, bold: true }, text], margin: [0, 0, 0, 5], lineHeight: 1.25,
  }))
  return [
    together(sectionHead('Method', settingsLine(settings)), first!),
    ...rest,
    together(textTable({
      head: sectionHead('Constants', 'with their sources'),
      columns: ['Quantity', 'Value', 'Source'],
      rows: constantRows(settings, settings.oceanAreaM2).map(({ name, value, source }) => [name, value, source]),
      widths: [110, 130, '*'],
    })),
  ]
}

const kinds: Record<ReportData['sources'][number]['kind'], string> = {
  'aquifer': 'aquifer', 'basin': 'basin', 'lake': 'lake', 'reservoir': 'reservoir', 'soil-water': 'soil water', 'snow-water': 'snow water',
  'ice-sector': 'ice sector', 'glacier-region': 'glacier region',
}

/** A checksum in four lines, so that it fits a column and can still be copied. */
function checksum(sha256: string): Block {
  return { text: sha256.match(/.{1,16}/g)?.join('\n') ?? '', fontSize: size.tiny, color: print.soft }
}

/** Of a region whose mass lies as a grid says: what an even spread would do. */
function patternOf(region: ReportData['result']['regions'][number] | undefined): string[] {
  return region?.evenSpread ? patternSentences({ ...region.evenSpread, pattern: region.perGt, even: region.evenSpread.perGt }) : []
}

export function sourceBlocks({ result, sources, observed }: ReportData): Block[] {
  const byKey = new Map(result.regions.map(region => [region.key, region]))
  const nameOf = (key: string) => sources.find(source => source.key === key)?.name ?? key
  const rows = sources.map((source) => {
    const region = byKey.get(source.key)
    const way = [...factRows(source.facts).map(({ name, text }) => `${name}: ${text}`), ...waterWaySentences(source, nameOf), ...patternOf(region)].join('\n')
    return [
      { text: [source.name, { text: `\n${kinds[source.kind]}, ${source.agency}${region ? `\n${formatArea(region.areaKm2)}` : ''}`, color: print.soft }] },
      { text: [source.source || 'not stated', { text: `\nversion ${source.seriesVersion}${region ? `, ${region.epochsUsed} epochs, ${formatShare(region.coverage).replace('+', '')} of the span` : ''}${way ? `\n${way}` : ''}`, color: print.soft }] },
      checksum(source.seriesSha256),
      checksum(source.outlineSha256),
    ]
  })
  const seen = observed ? [[{ text: [observed.name, { text: '\nobserved rotation', color: print.soft }] }, { text: observed.source || 'not stated' }, checksum(observed.originalSha256), { text: '–' }]] : []
  return [textTable({
    head: sectionHead('Data', 'sources, versions and checksums (SHA-256)'),
    columns: ['Region', 'Source of the series', 'Series', 'Outline'],
    rows: [...rows, ...seen],
    widths: [112, '*', 68, 68],
  })]
}

export function cautionBlocks({ result, comparison, invented }: ReportData): Block[] {
  const [first, ...rest] = cautionsFor(result, { comparison, invented }).map(key => caution(cautions[key]))
  return [together(sectionHead('Cautions'), first!), ...rest]
}

/** Who and when, and what a reader needs to make the figures again. */
export function recordBlocks(data: ReportData): Block[] {
  const { result, runHash, inputSha256, preparedBy, preparedAt, runNumber, scenarioName, workspaceName } = data
  const { edition } = data
  const rows: [string, string][] = [
    ['Account', workspaceName],
    ...(edition ? [['Edition', `${edition.title}, edition ${edition.n}, read at /p/${edition.slug}/${edition.n}`], ['Published', formatInstant(edition.createdAt)], ...(edition.licence ? [['Licence', edition.licence]] : [])] as [string, string][] : []),
    ['Scenario and run', `${scenarioName}, run ${runNumber}`],
    ['Prepared by', preparedBy],
    ['Run on', formatInstant(preparedAt)],
    ['Span', `${formatDate(result.span.fromMjd)} to ${formatDate(result.span.toMjd)}, ${formatNumber(result.epochsMjd.length)} months; gaps up to ${formatNumber(result.settings.maxGapDays)} days are bridged`],
    ['SHA-256 of the result', runHash],
    ['SHA-256 of the input', inputSha256],
    ['Engine', `Counterpoise ${result.engineVersion}`],
    ['Earth model, SHA-256', result.earthModelChecksum],
  ]
  return [together(textTable({ head: sectionHead('Record', 'the same input gives the same figures'), columns: [], rows, widths: [110, '*'] }))]
}

/** A withdrawn edition says so before its finding, with the reason. */
export function withdrawalBlocks({ edition }: ReportData): Block[] {
  if (!edition?.withdrawn) return []
  const { at, reason } = edition.withdrawn
  return [{
    stack: [
      { text: `This edition was withdrawn on ${formatInstant(at)}.`, bold: true, color: print.loss },
      { text: reason, margin: [0, 3, 0, 3], lineHeight: 1.2 },
      { text: 'It stays as it was so that what was cited can be read. Do not quote its figures.', color: print.soft },
    ],
    margin: [0, 10, 0, 4],
    unbreakable: true,
  }]
}

/** Runs along the top of every page but the first, and along the foot of all. */
export function runningHead({ scenarioName, runNumber, invented, edition }: ReportData, pageNumber: number): Block {
  const marks = [edition?.withdrawn ? 'Withdrawn' : '', invented ? 'Invented data' : ''].filter(Boolean).join(', ')
  const mark = marks ? [{ text: marks, bold: true, alignment: 'right', width: 130 }] : []
  const name = edition ? `${edition.title}, edition ${edition.n}` : `${scenarioName}, run ${runNumber}`
  const left = pageNumber === 1 ? { text: 'Counterpoise', bold: true } : { text: `Counterpoise  ${name}`, color: print.soft }
  return { columns: [left, ...mark], margin: [page.margin.left, 28, page.margin.right, 0], fontSize: size.small }
}

export function runningFoot({ runHash }: ReportData, pageNumber: number, pages: number): Block {
  return {
    columns: [
      { text: `Calculated, not observed. Run ${runHash.slice(0, 16)}`, color: print.soft },
      { text: `${pageNumber} of ${pages}`, alignment: 'right', color: print.soft, width: 60 },
    ],
    margin: [page.margin.left, 18, page.margin.right, 0],
    fontSize: size.small,
  }
}
