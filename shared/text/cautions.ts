import type { Comparison, RunResult } from '../types/run.ts'

/** Each caution once, word for word, for screens, PDF and public page. */
export const cautions = {
  core: 'Decadal changes in length of day come mostly from the Earth’s core; surface mass explains a small part. A small explained share is not an error.',
  legal: 'Attribution is not a finding of legal responsibility. Decisions on water allocation, dams and abstraction follow local law and licensed practice.',
  operational: 'Not for operational timekeeping, navigation or leap-second decisions: use the official Earth-orientation bulletins.',
  projection: 'A projection is the stated rule carried forward, not a forecast.',
  overlap: 'Some regions share ground and both count in full there, so mass may be counted twice. What was decided of each pair stands before the sum.',
  restOfWorld: 'The account may not hold the whole world: what it leaves out is the row “rest of the world”.',
  oceanNone: 'Without an ocean response mass is not conserved. This setting is a diagnostic, not a result.',
  notRemoved: 'Tides, atmosphere and ocean circulation are still in the observed series wherever they have not been taken out; they are in the residual as well.',
  noise: 'Errors of trends are one sigma under first-order autoregressive noise. Decadal length of day is closer to a random walk, for which they are too small.',
  calculated: 'The effect on rotation is calculated from reported mass change, not observed.',
  invented: 'Invented data: agencies, regions, people and series are made up, and the observed series is synthetic, made from a seed.',
} as const
export type CautionKey = keyof typeof cautions

/** The cautions that a run, its comparison and its data call for, in reading order. */
export function cautionsFor(
  result: RunResult,
  options: { comparison?: Comparison | null, invented?: boolean, projected?: boolean } = {},
): CautionKey[] {
  const compared = options.comparison ?? null
  const applies: Record<CautionKey, boolean> = {
    invented: options.invented === true,
    oceanNone: result.settings.ocean === 'none',
    overlap: result.overlaps.some(({ settled }) => settled?.choice !== 'subtract'),
    projection: options.projected === true,
    calculated: true,
    core: true,
    notRemoved: compared !== null && compared.notRemoved.length > 0,
    noise: compared !== null,
    restOfWorld: true,
    legal: true,
    operational: true,
  }
  return (Object.keys(applies) as CautionKey[]).filter(key => applies[key])
}
