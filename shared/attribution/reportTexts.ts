import { formatMeasured, formatSpan } from '../format/numbers.ts'
import type { AttributionBudget, Rate } from './budget.ts'

const percent = ({ value, sigma }: Rate): string => `${formatMeasured(value * 100, sigma * 100, { signed: false, unit: '%' }).text}`
const rate = (figure: Rate, unit: string): string => formatMeasured(figure.value, figure.sigma, { unit }).text

/** The finding of an attribution in one sentence: shares for the pole alone, rates side by side for the day. */
export function attributionSentence({ model, observed }: Pick<AttributionBudget, 'model' | 'observed'>, span: { fromMjd: number, toMjd: number }, from: 'rotation' | 'gravity' = 'rotation'): string {
  const gravity = from === 'gravity'
  const shares = model.ofObservedDrift
  const [calculated, seen] = [model.lodMicrosecondsPerYear, observed.lodMicrosecondsPerYear]
  const parts = [
    shares ? `regions and background account for ${percent(shares.shareAlong)} of the ${gravity ? 'drift of the pole that gravity stands for,' : 'observed drift of the pole'} along its direction and ${percent(shares.shareAcross)} across it` : '',
    calculated && seen ? `the day is calculated to change by ${rate(calculated, 'µs per year')} where ${gravity ? `gravity stands for ${rate(seen, 'µs per year')}` : `${rate(seen, 'µs per year')} is observed`}` : ''
  ].filter(Boolean)
  return parts.length > 0
    ? `Over ${formatSpan(span.fromMjd, span.toMjd)}, ${parts.join(', and ')}.`
    : `Over ${formatSpan(span.fromMjd, span.toMjd)}, the observed series gives no trend that the regions could be held against.`
}
