import type { AnswerOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'

export type RegionItem = AnswerOf<typeof contracts.regionList>['items'][number]
/** A region without its outline, which no list shows. */
export type RegionLine = Omit<RegionItem, 'geometry'>
export type RegionDetail = AnswerOf<typeof contracts.regionRead>
export type RegionTotal = AnswerOf<typeof contracts.regionTotal>
export type Prediction = AnswerOf<typeof contracts.regionPrediction>
export type TrendSummary = NonNullable<RegionItem['trend']>
export type VersionSummary = RegionDetail['versions'][number]
export type PerGt = RegionDetail['perGt']
