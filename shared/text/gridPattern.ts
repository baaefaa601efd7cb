import type { CellPattern } from '../earth/cellPattern.ts'
import { formatNumber, formatShare, formatSigned } from '../format/numbers.ts'

interface Effect { chi1Mas: number, chi2Mas: number, lodMicroseconds: number }

export interface PatternBesideEven { basis: CellPattern['basis'], cells: number, movedPart: number, pattern: Effect, even: Effect }

/** What the pattern of a grid changes, in words: how much mass lies elsewhere, and what that does to day and pole. */
export function patternSentences({ basis, cells, movedPart, pattern, even }: PatternBesideEven): string[] {
  const share = (part: number) => formatShare(part, part < 0.1 ? 1 : 0).replace('+', '')
  const of = basis === 'trend' ? 'the trends of its cells' : 'how its cells vary with its mass'
  return [
    `The mass lies as ${of} say, ${formatNumber(cells)} of them: ${share(movedPart)} of it elsewhere than an even spread would put it.`,
    `Spread evenly, ${dayDifference(pattern, even)} and ${poleDifference(pattern, even)}.`,
  ]
}

/** Where the outline was changed after its series was taken. */
export const patternLeftOut = 'The outline was changed after this series was taken from its grid: its mass is spread evenly. Take the series again to use the grid’s pattern.'

function dayDifference(pattern: Effect, even: Effect): string {
  const [with_, without] = [pattern.lodMicroseconds, even.lodMicroseconds]
  if (Math.sign(with_) !== Math.sign(without)) return 'the effect on the length of day would have the other sign'
  return `the effect on the length of day would be ${larger(Math.abs(without) / Math.abs(with_) - 1)}`
}

function poleDifference(pattern: Effect, even: Effect): string {
  const size = Math.hypot(even.chi1Mas, even.chi2Mas) / Math.hypot(pattern.chi1Mas, pattern.chi2Mas) - 1
  const angle = ({ chi1Mas, chi2Mas }: Effect) => Math.atan2(chi2Mas, chi1Mas) * 180 / Math.PI
  const turn = (angle(even) - angle(pattern) + 540) % 360 - 180
  return `that on the pole ${larger(size)}, turned by ${formatSigned(turn, 1)}°`
}

function larger(part: number): string {
  if (!Number.isFinite(part)) return 'another'
  if (Math.abs(part) < 5e-4) return 'the same within 0.05 %'
  return `${formatNumber(Math.abs(part) * 100, Math.abs(part) < 0.1 ? 1 : 0)} % ${part > 0 ? 'larger' : 'smaller'}`
}
