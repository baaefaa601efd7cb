import { WATER_DENSITY } from '../earth/constants.ts'
import { formatArea, formatDate, formatMeasured, formatNumber, formatSignificant } from '../format/numbers.ts'
import { subtractRate, subtractSeries } from './corrections.ts'
import { integratePeriods } from './periods.ts'
import type { Running } from './periods.ts'
import { gtPerMetre } from './recipe.ts'
import type { CorrectionKind, Material, Parameter, Recipe, RecipeStep, Replayed, SeriesTable, StepDone } from './recipe.ts'

/**
 * Carries a recipe out on the values of a file: the same recipe and values give the same digits, so a stored version can be made
 * again and each step be shown with its numbers.
 *
 * @returns masses in Gt, gain positive, with independent errors, walks and named shared errors
 * @throws InputError where rates have no periods, or periods with gaps or overlaps
 */
export function replayRecipe(recipe: Recipe, table: SeriesTable): Replayed {
  const done = carryOutRecipe(recipe, table)
  const steps = recipe.steps.map((step, i): StepDone => {
    const on = isOn(step)
    const sentence = sentenceOf(step, done.lost[i]!)
    return { kind: step.kind, on, sentence: on ? sentence : `Switched off: ${sentence}`, numbers: numbersOf(step) }
  })
  const { lost: _, ...series } = done
  return { ...series, steps }
}

/** As `replayRecipe`, without the sentences; `lost` counts the epochs that each step left out. */
export function carryOutRecipe(recipe: Recipe, table: SeriesTable): Omit<Replayed, 'steps'> & { lost: number[] } {
  let state: Running = { mjd: [...table.mjd], massGt: [...table.value], sigmaGt: table.sigma && [...table.sigma], walkGt2: null, factors: [] }
  const leftOut: Replayed['leftOut'] = []
  const lost = recipe.steps.map((step) => {
    if (!isOn(step)) return 0
    if (step.kind !== 'subtract-series') {
      state = carryOut(state, step, table)
      return 0
    }
    const { leftOut: missed, ...rest } = subtractSeries(state, step)
    state = rest
    leftOut.push(...missed)
    return missed.length
  })
  // + 0 turns −0 into 0, which JSON and people write the same.
  return { ...state, massGt: state.massGt.map(m => m + 0), leftOut, lost }
}

function isOn(step: RecipeStep): boolean {
  return 'on' in step ? step.on : true
}

function carryOut(state: Running, step: Exclude<RecipeStep, { kind: 'subtract-series' }>, table: SeriesTable): Running {
  switch (step.kind) {
    case 'unit': return scaled(state, step.unit.factor)
    case 'sign': return scaled(state, -1)
    case 'storage': return withParameter(state, step.parameter, step.parameter.value, step.coefficient === 'specific-yield' ? 'specific yield' : 'storativity')
    case 'density': return withParameter(state, step.parameter, step.parameter.value / WATER_DENSITY, `density of ${step.material}`)
    case 'area': return withParameter(state, step.parameter, gtPerMetre(step.parameter.value), 'area')
    case 'integrate': return integratePeriods(state, table, step.perPeriod)
    case 'subtract-rate': return subtractRate(state, step)
  }
}

function scaled(state: Running, factor: number): Running {
  return {
    ...state,
    massGt: state.massGt.map(m => m * factor),
    sigmaGt: state.sigmaGt && state.sigmaGt.map(s => s * Math.abs(factor)),
    walkGt2: state.walkGt2 && state.walkGt2.map(v => v * factor * factor),
    factors: state.factors.map(f => ({ ...f, loading: f.loading.map(l => l * factor) }))
  }
}

/** Multiplies by a parameter; its relative error then moves all epochs together, in proportion to their values. */
function withParameter(state: Running, parameter: Parameter, factor: number, ownName: string): Running {
  const next = scaled(state, factor)
  if (!(parameter.sigma > 0)) return next
  const relative = parameter.sigma / parameter.value
  return { ...next, factors: [...next.factors, { source: parameter.source ?? ownName, own: parameter.source === null, loading: Float64Array.from(next.massGt, m => m * relative) }] }
}

const materialNames: Record<Material, string> = { water: 'water', ice: 'ice', firn: 'firn', snow: 'snow', glacier: 'glacier ice and firn', own: 'the material' }
const correctionNames: Record<CorrectionKind, string> = {
  'isostatic': 'glacial isostatic adjustment', 'surface-water': 'surface water', 'soil-water': 'soil water', 'snow': 'snow', 'leakage': 'leakage', 'other': 'correction'
}

/** A parameter for people: 0.10 ± 0.03. */
function shown({ value, sigma, source }: Parameter, unit = ''): string {
  const figure = sigma > 0 ? formatMeasured(value, sigma, { signed: false }).text : value >= 1 && Number.isInteger(value) ? formatNumber(value) : formatSignificant(value, 4)
  return `${figure}${unit}${sigma > 0 ? `, an error that all epochs share${source ? ` (${source})` : ''}` : ''}`
}

function sentenceOf(step: RecipeStep, lost: number): string {
  switch (step.kind) {
    case 'unit': return step.unit.reading
    case 'sign': return 'The file counts withdrawal as positive: the sign is turned, so that a gain of mass is positive.'
    case 'storage': return `Head change × ${step.coefficient === 'specific-yield' ? 'specific yield' : 'storativity'} ${shown(step.parameter)} is a height of water.`
    case 'density': return `Times the density of ${materialNames[step.material]} over that of water, ${shown(step.parameter, ' kg/m³')} over ${WATER_DENSITY} kg/m³.`
    case 'area': return `Over ${formatArea(step.parameter.value / 1e6)} (area on the ellipsoid) at ${WATER_DENSITY} kg/m³: 1 m of water is ${formatSignificant(gtPerMetre(step.parameter.value), 5)} Gt${
      step.parameter.sigma > 0 ? `; the area is uncertain by ${formatArea(step.parameter.sigma / 1e6)}` : ''}.`
    case 'integrate': return `${step.perPeriod ? 'Amounts' : 'Rates'} are summed over the periods of their rows, from 0 at the first beginning${
      step.perPeriod ? '' : '; a period that ends on the day of the year on which it began counts whole years, another its days over 365.25'}.`
    case 'subtract-rate': return `Less ${correctionNames[step.what]}, “${step.name}”: ${formatMeasured(step.gtPerYear.value, step.gtPerYear.sigma, { unit: 'Gt/yr' }).text}.`
    case 'subtract-series': return `Less ${correctionNames[step.what]}, the series “${step.name}”${
      step.series.mjd.length > 0 ? ` from ${formatDate(step.series.mjd[0])} to ${formatDate(step.series.mjd.at(-1))}` : ''}, between its epochs where they are at most ${step.maxGapDays} days apart${
      lost > 0 ? `; ${lost === 1 ? 'one epoch' : `${lost} epochs`} that it does not cover ${lost === 1 ? 'is' : 'are'} left out` : ''}.`
  }
}

function numbersOf(step: RecipeStep): StepDone['numbers'] {
  const both = (name: string, { value, sigma }: Parameter, unit: string): StepDone['numbers'] => [{ name, value, unit }, { name: `one-sigma of ${name}`, value: sigma, unit }]
  switch (step.kind) {
    case 'unit': return [{ name: `${step.unit.canonical} per ${step.unit.typed}`, value: step.unit.factor, unit: step.unit.canonical }]
    case 'storage': return both(step.coefficient === 'specific-yield' ? 'specific yield' : 'storativity', step.parameter, '')
    case 'density': return both('density', step.parameter, 'kg/m³')
    case 'area': return both('area', step.parameter, 'm²')
    case 'subtract-rate': return both('rate', step.gtPerYear, 'Gt/yr')
    default: return []
  }
}
