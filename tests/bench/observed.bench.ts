import { readFileSync } from 'node:fs'
import { gunzipSync } from 'node:zlib'
import { parseObserved } from '../../shared/observed/parse.ts'
import { reduceObserved } from '../../shared/observed/reduce.ts'
import { readMassSeries } from '../../shared/series/readMassSeries.ts'
import { fastest, type Figure } from './measure.ts'

/** Reading of observed series and of mass series. */
export function run(): Figure[] {
  const c04 = gunzipSync(readFileSync('tests/fixtures/eop14c04_1962_2022.txt.gz')).toString('latin1')
  const csv = `date,Gt,sigma\n${Array.from({ length: 100_000 }, (_, i) => `${20_000 + i / 2},${Math.sin(i)},${1 + i % 3}`).join('\n')}`
  const series = parseObserved(c04)
  return [
    { name: 'EOP 14 C04, 22 248 days parsed', value: fastest(() => parseObserved(c04)), unit: 'ms', note: 'limit 500 ms' },
    { name: 'sixty years of days reduced: tides, excitation, trends', value: fastest(() => reduceObserved(series, { zonalTides: true }), 3), unit: 'ms', note: 'limit 1000 ms' },
    { name: 'the same with monthly means', value: fastest(() => reduceObserved(series, { zonalTides: true, monthly: true }), 3), unit: 'ms', note: 'limit 1000 ms' },
    { name: 'mass series of 100 000 rows read and checked', value: fastest(() => readMassSeries(csv)), unit: 'ms', note: 'limit 3000 ms' }
  ]
}
