/**
 * Advance widths of Noto Sans, thousandths of an em: U+0020…U+007E, then U+00A0…U+00FF. Read from the font files of
 * @expo-google-fonts/noto-sans 0.4.2; a test reads them again.
 */
const regular: readonly number[] = [
  260, 269, 408, 646, 572, 831, 732, 225, 300, 300, 551, 572, 268, 322, 268, 372, 572, 572, 572, 572, 572, 572, 572, 572,
  572, 572, 268, 268, 572, 572, 572, 434, 899, 639, 650, 632, 730, 556, 519, 728, 741, 339, 273, 619, 524, 907, 760, 781,
  605, 781, 622, 549, 556, 731, 600, 930, 586, 566, 572, 329, 372, 329, 572, 444, 281, 561, 615, 480, 615, 564, 344, 615,
  618, 258, 258, 534, 258, 935, 618, 605, 615, 615, 413, 479, 361, 618, 508, 786, 529, 510, 470, 380, 551, 380, 572,
  260, 269, 572, 572, 572, 572, 551, 513, 580, 832, 357, 509, 572, 322, 832, 500, 428, 572, 350, 350, 281, 623, 655, 268,
  225, 350, 376, 509, 745, 771, 781, 434, 639, 639, 639, 639, 639, 639, 881, 632, 556, 556, 556, 556, 339, 339, 339, 339,
  730, 760, 781, 781, 781, 781, 781, 572, 781, 731, 731, 731, 731, 566, 605, 631, 561, 561, 561, 561, 561, 561, 864, 480,
  564, 564, 564, 564, 258, 258, 258, 258, 605, 618, 605, 605, 605, 605, 605, 572, 605, 618, 618, 618, 618, 510, 615, 510,
]
const semibold: readonly number[] = [
  260, 277, 452, 646, 572, 875, 743, 250, 324, 324, 546, 572, 279, 320, 276, 399, 572, 572, 572, 572, 572, 572, 572, 572,
  572, 572, 276, 279, 572, 572, 572, 461, 898, 672, 659, 638, 732, 558, 538, 726, 756, 370, 309, 647, 546, 929, 793, 787,
  615, 787, 643, 550, 569, 747, 631, 953, 638, 603, 576, 330, 399, 330, 572, 423, 333, 585, 626, 502, 626, 585, 371, 626,
  638, 283, 283, 588, 283, 960, 638, 617, 626, 626, 434, 493, 406, 638, 547, 830, 560, 548, 484, 389, 551, 389, 572,
  260, 280, 572, 572, 570, 572, 551, 496, 588, 832, 372, 574, 572, 320, 832, 500, 426, 572, 368, 369, 333, 642, 650, 276,
  249, 369, 382, 574, 798, 835, 821, 461, 672, 672, 672, 672, 672, 672, 925, 638, 558, 558, 558, 558, 370, 370, 370, 370,
  732, 788, 787, 787, 787, 787, 787, 572, 787, 747, 747, 747, 747, 603, 619, 676, 585, 585, 585, 585, 585, 585, 897, 502,
  585, 585, 585, 585, 283, 283, 283, 283, 619, 638, 617, 617, 617, 617, 617, 572, 614, 638, 638, 638, 638, 548, 626, 548,
]

/** Signs outside the two blocks: regular, semibold. */
const signs: Readonly<Record<string, readonly [number, number]>> = {
  '\u2212': [572, 577], '\u2013': [500, 500], '\u2014': [1000, 1000], '\u2018': [175, 201], '\u2019': [175, 201],
  '\u201c': [359, 413], '\u201d': [359, 413], '\u2026': [791, 831], '\u202f': [166, 166], '\u2009': [166, 166],
  '\u2007': [572, 572], '\u2008': [268, 276], '\u0394': [639, 659], '\u03c3': [614, 640], '\u03c7': [594, 611], '\u2081': [350, 369], '\u2082': [350, 369], '\u2083': [350, 369],
}

export type Weight = 400 | 600

function advance(character: string, weight: Weight): number {
  const sign = signs[character]
  if (sign) return weight === 600 ? sign[1] : sign[0]
  const code = character.codePointAt(0)!
  const table = weight === 600 ? semibold : regular
  if (code >= 0x20 && code <= 0x7E) return table[code - 0x20]!
  if (code >= 0xA0 && code <= 0xFF) return table[95 + code - 0xA0]!
  // Combining marks stand over their letter; other alphabets are near the width of a wide Latin letter, ideographs fill the em.
  if (code >= 0x300 && code <= 0x36F) return 0
  return code >= 0x1100 ? 1000 : 680
}

/** Width of a line of Noto Sans in px at a font size in px; beyond Latin-1 an upper estimate. */
export function textWidth(text: string, size: number, weight: Weight = 400): number {
  let sum = 0
  for (const character of text) sum += advance(character, weight)
  return sum * size / 1000
}

/** The text, or as much of it as fits into a width in px, ending in an ellipsis. */
export function shortened(text: string, width: number, size: number, weight: Weight = 400): string {
  if (textWidth(text, size, weight) <= width) return text
  const characters = [...text]
  while (characters.length > 1) {
    characters.pop()
    const candidate = `${characters.join('').trimEnd()}…`
    if (textWidth(candidate, size, weight) <= width) return candidate
  }
  return '…'
}
