import { checkSeries } from '../../shared/series/checks.ts'
import { readMassSeries, readMassSeriesPaced } from '../../shared/series/readMassSeries.ts'
import { fastest, type Figure } from './measure.ts'

/** Reading and checking of long mass series. */
export async function run(): Promise<Figure[]> {
  const csv = `date,Gt,sigma\n${Array.from({ length: 100_000 }, (_, i) => `${20_000 + i / 2},${(50 * Math.sin(i / 116) + i % 17).toFixed(3)},${1 + i % 3}`).join('\n')}`
  let longest = 0
  let last = performance.now()
  await readMassSeriesPaced(csv, {}, {
    pause: () => {
      longest = Math.max(longest, performance.now() - last)
      return new Promise(resolve => setImmediate(() => {
        last = performance.now()
        resolve()
      }))
    }
  })
  return [
    {
      name: 'mass series of 100 000 rows read and checked for gaps, outliers, steps', unit: 'ms', note: 'limit 3000 ms, storing included',
      value: fastest(() => {
        const { mjd, massGt, sigmaGt, rows } = readMassSeries(csv)
        return checkSeries({ mjd, massGt, sigmaGt, rows: rows.map(row => row.row) })
      }, 3)
    },
    { name: 'longest stretch without a pause while 100 000 rows are read', value: longest, unit: 'ms', note: 'limit 200 ms' }
  ]
}
