import { eq } from 'drizzle-orm'
import Papa from 'papaparse'
import { isoDateFromMjd } from '#shared/earth/time/epochs'
import type { Measured } from '#shared/types/domain'
import type { BudgetRow, Comparison, DerivedRates, RunRegionResult, RunResult } from '#shared/types/run'
import { schema } from '../database/client'
import { nameOfUser } from './change'
import type { Context } from './context'
import { runPicture } from './pictures'
import { mapFile, runMap } from './report/mapPicture'
import { reportPdf } from './report/reportPdf'
import type { ReportData } from './report/types'
import { runInputOf, runResultOf, sourcesOf, type RunRow } from './runs'

export type ExportFile = 'report.pdf' | 'budget.csv' | 'series.csv' | 'regions.geojson' | 'map.svg' | 'map.png' | 'run.json'

export const exportTypes: Record<ExportFile, string> = {
  'report.pdf': 'application/pdf', 'budget.csv': 'text/csv; charset=utf-8', 'series.csv': 'text/csv; charset=utf-8',
  'regions.geojson': 'application/geo+json', 'map.svg': 'image/svg+xml', 'map.png': 'image/png', 'run.json': 'application/json',
}

interface ExportSource { run: RunRow, comparison: Comparison | null, observed: { name: string, source: string, originalSha256: string } | null, edition?: ReportData['edition'] }

/** One of the files that a run can be taken away in. */
export async function exportRun(context: Context, file: ExportFile, source: ExportSource): Promise<Uint8Array | string> {
  const { run, comparison } = source
  const result = runResultOf(run)
  switch (file) {
    case 'budget.csv': return budgetCsv(result)
    case 'series.csv': return seriesCsv(result)
    case 'regions.geojson': return regionsGeojson(run, result)
    case 'map.svg': return mapFile(runMap({ result, sources: runInputOf(run).regions }))
    case 'map.png': return runPicture(context, run)
    case 'run.json': return JSON.stringify({
      run: { n: run.n, name: run.name, engine: run.engine, node: run.node, createdAt: run.createdAt, inputSha256: run.inputSha256, resultSha256: run.resultSha256 },
      hashing: 'SHA-256 over canonical JSON (RFC 8785) of “input” as it stands here, and of “result”',
      input: JSON.parse(run.input) as unknown, result, comparison,
    }, null, 1)
    case 'report.pdf': {
      const workspace = context.db.select().from(schema.workspace).where(eq(schema.workspace.id, run.workspaceId)).get()!
      return reportPdf({
        result, comparison, scenarioName: run.name, workspaceName: workspace.name, runNumber: run.n, runHash: run.resultSha256, inputSha256: run.inputSha256,
        preparedBy: nameOfUser(context, run.createdBy) ?? '', preparedAt: run.createdAt, sources: runInputOf(run).regions, invented: workspace.invented,
        observed: source.observed, edition: source.edition,
      })
    }
  }
}

const head = (result: RunResult) => [
  `# Counterpoise ${result.engineVersion}, ocean ${result.settings.ocean}, coefficients ${result.settings.coefficients}, core ${result.settings.core}`,
  `# Span ${isoDateFromMjd(result.span.fromMjd)} to ${isoDateFromMjd(result.span.toMjd)}. Calculated, not observed. One-sigma errors.`,
].join('\n')

/** Model uncertainty as remarks: it belongs to the sum and is part of no sigma. */
function modelLines(result: RunResult): string {
  return (result.modelUncertainty ?? []).map(line =>
    `# Model uncertainty, not in any sigma: ${line.name}: LOD ${line.lodMicrosecondsPerYear} microseconds per year, chi1 ${line.chi1MasPerYear} mas per year, chi2 ${line.chi2MasPerYear} mas per year\n`).join('')
}

function budgetCsv(result: RunResult): string {
  const rows: BudgetRow[] = [...result.regions, result.total, ...result.background, result.restOfWorld]
  const cells = (name: string, m: Measured | null) => ({ [name]: m?.value ?? '', [`sigma_${name}`]: m?.sigma ?? '' })
  const derivedCells = (derived: DerivedRates | undefined) => ({
    ...cells('delta_c21_per_year', derived?.deltaC21PerYear ?? null),
    ...cells('delta_s21_per_year', derived?.deltaS21PerYear ?? null),
    ...cells('geocentre_x_mm_per_year', derived?.geocentreMmPerYear?.x ?? null),
    ...cells('geocentre_y_mm_per_year', derived?.geocentreMmPerYear?.y ?? null),
    ...cells('geocentre_z_mm_per_year', derived?.geocentreMmPerYear?.z ?? null),
  })
  return `${head(result)}\n${modelLines(result)}${Papa.unparse(rows.map(row => ({
    row: row.key, name: row.name,
    ...cells('mass_Gt_per_year', row.massGtPerYear),
    ...cells('lod_microseconds_per_year', row.lodMicrosecondsPerYear),
    ...cells('lod_ms_per_century', row.lodMsPerCentury),
    ...cells('chi1_mas_per_year', row.chi1MasPerYear),
    ...cells('chi2_mas_per_year', row.chi2MasPerYear),
    ...cells('drift_cm_per_year', row.driftCmPerYear),
    direction_deg_east: row.directionDegEast?.value ?? '', sigma_direction_deg: row.directionDegEast?.sigma ?? '',
    ...cells('barystatic_mm_per_year', row.barystaticMmPerYear),
    ...cells('delta_j2_per_year', row.deltaJ2PerYear),
    ...derivedCells((row as Partial<RunRegionResult>).derived),
    share_of_model_lod: row.shareOfModelLod ?? '', share_of_model_pole: row.shareOfModelPole ?? '',
  })), { newline: '\n', escapeFormulae: true })}\n`
}

function seriesCsv(result: RunResult): string {
  const total = result.total.series
  const rows = result.epochsMjd.map((mjd, i) => ({
    mjd, date: isoDateFromMjd(mjd),
    lod_microseconds: total.lodMicroseconds[i] ?? '', sigma_lod_microseconds: total.sigmaLodMicroseconds[i] ?? '',
    chi1_mas: total.chi1Mas[i] ?? '', sigma_chi1_mas: total.sigmaChi1Mas[i] ?? '',
    chi2_mas: total.chi2Mas[i] ?? '', sigma_chi2_mas: total.sigmaChi2Mas[i] ?? '',
    ...Object.fromEntries(result.regions.map(r => [`mass_Gt ${r.name}`, r.massGt[i] ?? ''])),
  }))
  return `${head(result)}\n${Papa.unparse(rows, { newline: '\n', escapeFormulae: true })}\n`
}

function regionsGeojson(run: RunRow, result: RunResult): string {
  const byKey = new Map(result.regions.map(r => [r.key, r]))
  return JSON.stringify({
    type: 'FeatureCollection',
    features: sourcesOf(runInputOf(run)).map((source) => {
      const row = byKey.get(source.key)
      return {
        type: 'Feature', geometry: source.geometry,
        properties: {
          name: source.name, kind: source.kind, agency: source.agency, areaKm2: row?.areaKm2, massGtPerYear: row?.massGtPerYear?.value,
          lodMicrosecondsPerYear: row?.lodMicrosecondsPerYear?.value, chi1MasPerYear: row?.chi1MasPerYear?.value, chi2MasPerYear: row?.chi2MasPerYear?.value,
        },
      }
    }),
  })
}
