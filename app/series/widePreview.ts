import { fitTrend } from '#shared/earth/time/trend'
import { readMassTable, type WideSeriesChoice } from '#shared/series/readMassTable'
import type { TableSource } from '#shared/series/table'
import { InputError, type Issue } from '#shared/types/issue'

export interface WideTask { ticket: number, source: TableSource, series: (WideSeriesChoice & { regionId: string })[], withdrawalPositive: boolean }

/** What one column would become. */
export interface WideRow { regionId: string, count: number, bad: number, firstMjd: number | null, lastMjd: number | null, trend: { value: number, sigma: number } | null, steps: string[] }
export interface WidePreview { rows: WideRow[], issues: Issue[], badRows: number, fault: string | null }

/** Reads the chosen columns of a wide table as the server will. Pure, so that a worker can do it. */
export function widePreviewOf({ source, series, withdrawalPositive }: Omit<WideTask, 'ticket'>): WidePreview {
  if (series.length === 0) return { rows: [], issues: [], badRows: 0, fault: null }
  try {
    const { series: read } = readMassTable(source, { series, withdrawalPositive })
    return {
      rows: read.map(({ mjd, massGt, sigmaGt, issues, conversion }, i) => ({
        regionId: series[i]!.regionId, count: mjd.length, bad: issues.length, firstMjd: mjd[0] ?? null, lastMjd: mjd.at(-1) ?? null,
        trend: trendOf(mjd, massGt, sigmaGt), steps: conversion.steps,
      })),
      issues: read.flatMap(({ issues }) => issues.slice(0, 20)).slice(0, 60),
      badRows: read.reduce((sum, { issues }) => sum + issues.length, 0), fault: null,
    }
  }
  catch (error) {
    if (!(error instanceof InputError)) throw error
    return { rows: [], issues: error.issues, badRows: 0, fault: error.message }
  }
}

function trendOf(mjd: number[], value: number[], sigma: number[] | null): WideRow['trend'] {
  try {
    const fit = fitTrend({ mjd, value, sigma })
    return { value: fit.value, sigma: fit.sigma }
  }
  catch (error) {
    if (error instanceof RangeError) return null
    throw error
  }
}
