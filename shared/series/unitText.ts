/** Cubic metres of an acre-foot: 43 560 cubic feet of 0.3048 m. NIST Handbook 44 (2023), appendix C; the survey foot is retired since 2023. */
export const ACRE_FOOT_M3 = 43_560 * 0.3048 ** 3

/** A unit as it was typed, put into words that a parser of units knows. */
export interface UnitText {
  /** Number before the unit: 10⁶ of “10⁶ m³”. */
  multiplier: number
  /** Product and quotient of units, e.g. `Gt/year`; empty for a text without a unit. */
  expression: string
  /** What the text says, in words, e.g. “million cubic metres”; null where the expression says it as well. */
  words: string | null
  /** What the values are said to be of: w.e., H₂O, EWH and the like give water, i.e. and “ice” give ice. */
  of: 'water' | 'ice' | null
}

/** A name with its other spellings: [pattern of the whole name, expression, multiplier, words]. Case counts where SI says so. */
type Name = [RegExp, string, number, string]

const names: Name[] = [
  [/^(?:gigaton(?:ne)?s?|gton(?:ne)?s?|gt)$/i, 'Gt', 1, 'gigatonnes'],
  [/^(?:billion (?:metric )?ton(?:ne)?s|petagrams?|Pg)$/, 'Gt', 1, 'gigatonnes'],
  [/^(?:megaton(?:ne)?s?|mton(?:ne)?s?|Mt|million (?:metric )?ton(?:ne)?s|Tg|teragrams?)$/, 'Mt', 1, 'megatonnes'],
  [/^(?:kiloton(?:ne)?s?|kt|Gg)$/, 'kt', 1, 'kilotonnes'],
  [/^(?:tonnes?|metric tons?|t)$/i, 't', 1, 'tonnes'],
  [/^(?:kilograms?|kilogrammes?|kg)$/i, 'kg', 1, 'kilograms'],
  [/^(?:acre[ -]?f(?:ee|oo)?t|ac[ .-]?ft|af)$/i, 'm^3', ACRE_FOOT_M3, 'acre-feet'],
  [/^(?:thousand acre[ -]?f(?:ee|oo)?t|taf|kaf)$/i, 'm^3', 1e3 * ACRE_FOOT_M3, 'thousand acre-feet'],
  [/^(?:million acre[ -]?f(?:ee|oo)?t|maf)$/i, 'm^3', 1e6 * ACRE_FOOT_M3, 'million acre-feet'],
  // Mega- goes on the metre in SI, which nobody who writes Mm³ of water means.
  [/^(?:Mm\^?3|mcm|hm\^?3|million (?:cubic met(?:er|re)s?|m\^?3)|mio\.? m\^?3)$/i, 'm^3', 1e6, 'million cubic metres'],
  [/^(?:bcm|(?:billion|milliard) (?:cubic met(?:er|re)s?|m\^?3)|mrd\.? m\^?3)$/i, 'm^3', 1e9, 'billion cubic metres'],
  [/^(?:cubic kilomet(?:er|re)s?|km\^?3)$/i, 'km^3', 1, 'cubic kilometres'],
  [/^(?:cubic met(?:er|re)s?|m\^?3|cbm)$/i, 'm^3', 1, 'cubic metres'],
  [/^(?:megalit(?:er|re)s?|ML)$/, 'm^3', 1e3, 'megalitres'],
  [/^(?:gigalit(?:er|re)s?|GL)$/, 'm^3', 1e6, 'gigalitres'],
  [/^(?:cubic f(?:ee|oo)t|cu\.? ?ft|ft\^?3)$/i, 'ft^3', 1, 'cubic feet'],
  [/^(?:millimet(?:er|re)s?|mm)$/, 'mm', 1, 'millimetres'],
  [/^(?:centimet(?:er|re)s?|cm)$/, 'cm', 1, 'centimetres'],
  [/^(?:met(?:er|re)s?|m)$/, 'm', 1, 'metres'],
  [/^(?:f(?:ee|oo)t|ft)$/i, 'ft', 1, 'feet'],
  [/^(?:inch(?:es)?|in)$/i, 'in', 1, 'inches'],
  [/^(?:years?|yrs?|annum|an|a|y)$/i, 'year', 1, 'year'],
  [/^(?:months?|mon|mo)$/i, 'month', 1, 'month'],
  [/^(?:weeks?|wk)$/i, 'week', 1, 'week'],
  [/^(?:days?|d)$/i, 'day', 1, 'day'],
  [/^(?:hours?|h|hr)$/i, 'hour', 1, 'hour'],
  [/^(?:seconds?|sec|s)$/i, 's', 1, 'second']
]

const waterWords = /\b(?:w\.? ?e(?:q(?:uiv)?)?\b\.?|water[ -]equivalents?(?: height| thickness)?|equivalent water (?:height|thickness)|of (?:liquid )?water|h_?2o|ewh|ewt|lwe(?:t)?|tws(?:a)?)/gi
const iceWords = /\b(?:i\. ?e\.(?: ?q\.?)?|ice[ -]equivalents?|of ice|ice)/gi
const superscripts = '⁰¹²³⁴⁵⁶⁷⁸⁹'

/**
 * Makes what people type ready for a parser: km³, 10⁶ m³, Gt/yr, kg m⁻², m w.e. a⁻¹, acre-feet, 12,5 mm. The parts of the unit are
 * looked up in a list of names first, so that Mm³ is a million cubic metres and an acre-foot has all its digits.
 *
 * @throws RangeError for “ton”, which is 1000 kg here and 907 kg there
 */
export function normaliseUnit(typed: string): UnitText {
  let text = typed.trim().replace(/[\u2212\u2013\u207B]/g, '-').replace(/[·⋅×*•]/g, ' ').replace(/\s+/g, ' ')
  text = text.replace(/(-?)([⁰¹²³⁴⁵⁶⁷⁸⁹]+)/g, (_, sign: string, digits: string) => `^${sign}${[...digits].map(d => superscripts.indexOf(d)).join('')}`)
  text = text.replace(/[₀₁₂₃₄₅₆₇₈₉]/g, d => String('₀₁₂₃₄₅₆₇₈₉'.indexOf(d)))
  const of = text.search(waterWords) >= 0 ? 'water' : text.search(iceWords) >= 0 ? 'ice' : null
  text = text.replace(waterWords, ' ').replace(iceWords, ' ').replace(/[()[\]{}]/g, ' ').replace(/\bper\b/gi, '/').replace(/\s+/g, ' ').trim()
  const { multiplier, rest } = leadingNumber(text)
  const parts = rest.split('/').map(part => part.trim())
  const words: string[] = []
  let factor = multiplier
  const expressions = parts.map((part, i) => {
    const { expression, scale, name } = product(part)
    factor *= i === 0 ? scale : 1 / scale
    if (name) words.push(i === 0 ? name : name.replace(/s$/, ''))
    return expression
  })
  const said = words.length === parts.length && rest !== '' ? words.join(' per ') : null
  return { multiplier: factor, expression: expressions.join(' / '), words: multiplierWords(multiplier, said), of }
}

/** 10^6, 1e6, 1000, 12,5 before a unit. */
function leadingNumber(text: string): { multiplier: number, rest: string } {
  const match = /^(?:10\^(-?\d{1,2})|(\d+(?:[.,]\d+)?(?:e[+-]?\d+)?))(?= ?[a-z])\s?/i.exec(text)
  if (!match) return { multiplier: 1, rest: text }
  const multiplier = match[1] === undefined ? Number(match[2]!.replace(',', '.')) : 10 ** Number(match[1])
  return { multiplier, rest: text.slice(match[0].length) }
}

function multiplierWords(multiplier: number, words: string | null): string | null {
  if (words === null || multiplier === 1) return words
  const counted = ({ 1e3: 'thousand', 1e6: 'million', 1e9: 'billion' } as Record<number, string>)[multiplier]
  return `${counted ?? String(multiplier)} ${words}`
}

/** One side of a quotient: a known name, or a product of names with exponents. */
function product(part: string): { expression: string, scale: number, name: string | null } {
  const whole = lookUp(part)
  if (whole) return { expression: whole[1], scale: whole[2], name: whole[3] }
  let scale = 1
  const named: string[] = []
  const factors = part.split(' ').filter(Boolean).map((factor) => {
    const match = /^([a-zµμ°]+)\.?(?:\^?(-?\d+))?$/i.exec(factor)
    if (!match) return factor
    const exponent = match[2] === undefined ? 1 : Number(match[2])
    const known = lookUp(factor) ?? lookUp(match[1]!)
    if (!known) return factor.replace(/([a-z])(-?\d)/i, '$1^$2')
    const power = known[0].test(factor) ? 1 : exponent
    scale *= known[2] ** power
    named.push(power < 0 ? `per ${power === -2 ? 'square ' : ''}${known[3].replace(/s$/, '')}` : power === 2 ? `square ${known[3]}` : known[3])
    return power === 1 ? known[1] : `${known[1]}^${power}`
  })
  return { expression: factors.join(' '), scale, name: named.length === factors.length && named.length > 0 ? named.join(' ') : null }
}

function lookUp(text: string): Name | undefined {
  if (/^(?:short |long )?tons?$/i.test(text)) {
    throw new RangeError('“ton” may be 1000 kg, 907 kg or 1016 kg: write tonnes, kg, or Gt')
  }
  return names.find(([pattern]) => pattern.test(text))
}
