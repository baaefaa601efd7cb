import { readFileSync } from 'node:fs'
import { gunzipSync } from 'node:zlib'
import { comparisonStatistics } from '../../shared/attribution/comparisonStatistics.ts'
import { identifiability } from '../../shared/attribution/identifiability.ts'
import { seriesSignatures } from '../../shared/attribution/signatures.ts'
import { estimateScaling } from '../../shared/attribution/scaling.ts'
import { runChain } from '../../shared/observed/chain.ts'
import { plainChain } from '../../shared/observed/chainPlain.ts'
import type { Chain, FluidCorrection } from '../../shared/observed/chainTypes.ts'
import { parseObserved } from '../../shared/observed/parse.ts'
import { world } from '../unit/attribution/syntheticWorld.ts'
import { fastest, type Figure } from './measure.ts'

/** An invented atmosphere, every three hours over the span of the observed series. */
function invented(from: number, to: number): FluidCorrection {
  const mjd = Float64Array.from({ length: (to - from) * 8 }, (_, i) => from + i / 8)
  const terms = { chi1: mjd.map(t => 1e-8 * Math.sin(t / 60)), chi2: mjd.map(t => 1e-8 * Math.cos(t / 60)), chi3: mjd.map(t => 1e-9 * Math.sin(t / 58)) }
  return {
    name: 'Invented atmosphere', source: 'invented',
    fields: { component: 'atmosphere', model: 'invented', pairedWith: null, invertedBarometer: 'yes', coefficients: 'gross-2007', subtracted: '', barystatic: 'no' },
    series: { mjd, mass: terms, motion: terms, stepDays: 1 / 8, rowsRead: mjd.length, emptyRows: 0, issues: [], understood: [], suggestedComponent: 'atmosphere' }
  }
}

/** Reduction chain and attribution. */
export function run(): Figure[] {
  const c04 = parseObserved(gunzipSync(readFileSync('tests/fixtures/eop14c04_1962_2022.txt.gz')).toString('latin1'))
  const chain: Chain = {
    schemaVersion: 1, from: null, to: null, includePredictions: false,
    steps: [
      { kind: 'zonal-tides', on: true, set: 'all' }, { kind: 'excitation', on: true, periodDays: 433, q: 179 },
      { kind: 'angular-momentum', on: true, correction: 'air', mass: true, motion: true, trend: false }, { kind: 'seasons', on: true },
      { kind: 'smoothing', on: true, smoothing: { kind: 'gaussian', widthDays: 30 } }, { kind: 'monthly', on: true }
    ]
  }
  const corrections = { air: invented(c04.mjd[0]! - 1, c04.mjd.at(-1)! + 1) }
  const { data } = world(1, { groups: 40, months: 600 })
  const block = data.blocks[0]!
  const compared = { mjd: block.mjd, observed: Array.from(block.value), model: Array.from(data.groups[0]!.signatures[0]!) }
  return [
    { name: 'sixty years of days through a chain of six steps', value: fastest(() => plainChain(runChain(c04, chain, { corrections })), 3), unit: 'ms', note: 'limit 1000 ms' },
    { name: 'scaling of 40 groups by 3 × 600 months, noise estimated', value: fastest(() => estimateScaling(data, { band: 'interannual' })), unit: 'ms', note: 'limit 200 ms' },
    { name: 'identifiability of 40 groups by 3 × 600 months', value: fastest(() => identifiability(seriesSignatures(data))), unit: 'ms' },
    { name: 'statistics of a comparison over 600 months', value: fastest(() => comparisonStatistics(compared)), unit: 'ms', note: 'limit 50 ms' }
  ]
}
