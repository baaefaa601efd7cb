import type { AnswerOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'
import { formatSpan } from '#shared/format/numbers'
import { counted } from '#shared/text/words'
import { mapRegions } from '~/result/map'
import type { SeaLevelQuestion } from './question'
import { seaLevelView } from './view'

type Frozen = Pick<AnswerOf<typeof contracts.runRead>, 'result' | 'sources'>

/** The map of the sea of a run or of the edition that froze it; `elsewhere` is water that lies nowhere in particular, Gt per year, and is not in it. */
export function runSeaLevelView({ result, sources }: Frozen, answer: AnswerOf<typeof contracts.runSeaLevel>, question: SeaLevelQuestion) {
  const regions = mapRegions(result, sources)
  const elsewhere = result.regions.filter(row => row.keptFrom && row.areaKm2 === 0).reduce((sum, row) => sum + (row.massGtPerYear?.value ?? 0), 0)
  const counting = regions.filter(({ massGtPerYear }) => massGtPerYear !== null).length
  const view = seaLevelView(answer, regions, question, {
    subject: `For reported mass change in ${counted(counting, 'region')}, ${formatSpan(result.span.fromMjd, result.span.toMjd)},`,
    unit: 'mm per year',
    sigma: elsewhere === 0 ? result.total.barystaticMmPerYear?.sigma ?? null : null,
  })
  return { view, elsewhere }
}
