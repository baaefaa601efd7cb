/** Which fits of factors are given: seasons and slower change apart, the slower one with and without a trend of its own. */
export const scalingVariants = ['interannual', 'interannual-without-trend', 'annual'] as const
export type ScalingVariant = typeof scalingVariants[number]
