// npm run bench, or of some files only: npm run bench -- earth time
import { readdirSync } from 'node:fs'
import { cpus, totalmem } from 'node:os'
import type { Figure } from './measure.ts'

const chosen = process.argv.slice(2)
const names = readdirSync('tests/bench').filter(file => file.endsWith('.bench.ts')).map(file => file.replace('.bench.ts', '')).sort()

/** The limit or target that a figure's note states, in the figure's unit. */
function limitOf({ note, unit }: Figure): number | null {
  const [, digits, of] = /(?:limit|target) ([\d.,  ]*\d) ?(\S+)/.exec(note ?? '') ?? []
  return digits && of === unit ? Number(digits.replace(/[ ,]/g, '')) : null
}

function shown(value: number): string {
  return value >= 100 ? value.toFixed(0) : value >= 1 ? value.toFixed(2) : value.toPrecision(2)
}

const figures: Figure[] = []
for (const name of names) {
  if (chosen.length && !chosen.includes(name)) continue
  process.stderr.write(`measuring ${name} …\n`)
  const { run } = await import(`./${name}.bench.ts`) as { run: () => Figure[] | Promise<Figure[]> }
  figures.push(...await run())
}

const width = Math.max(...figures.map(figure => figure.name.length))
console.log(`\n${cpus().length} × ${cpus()[0]?.model.trim() ?? 'unknown processor'}, ${(totalmem() / 2 ** 30).toFixed(0)} GiB, Node ${process.versions.node} ${process.arch}\n`)
for (const figure of figures) {
  const limit = limitOf(figure)
  const ratio = limit === null ? '' : `${(figure.value / limit).toFixed(2)} of ${limit} ${figure.unit}${figure.value > limit ? ', OVER' : ''}`
  const note = (figure.note ?? '').split('; ').filter(part => !/^(limit|target) /.test(part)).join('; ')
  console.log(`${figure.name.padEnd(width)}  ${shown(figure.value).padStart(9)} ${figure.unit.padEnd(6)} ${[ratio, note].filter(Boolean).join('  ')}`)
}
