/**
 * The colours of the product, each named by what it means. The one place where a colour is written down: style sheets,
 * Tailwind, map style, figures and PDF all take it from here. Hex, because map renderers and PDF writers read nothing else.
 */

export const tokenNames = [
  'paper', 'wash', 'ink', 'soft', 'hairline',
  'model', 'onModel', 'loss', 'gain', 'observed', 'residual',
  'sea', 'land', 'caution',
] as const
export type TokenName = typeof tokenNames[number]
export type Palette = Readonly<Record<TokenName, string>>
export type ThemeName = 'light' | 'dark' | 'print'

/** Screen by day: ink on warm white. */
export const light: Palette = {
  /** The page. */
  paper: '#fbfaf6',
  /** A faint tint of the page: a row under the pointer, a code block. */
  wash: '#f1f0eb',
  ink: '#131e2b',
  /** Second rank of text: units, uncertainties, axis labels. */
  soft: '#535c66',
  /** Rules between rows and grid lines; never the only carrier of a meaning. */
  hairline: '#d6d4ce',
  /** What is calculated, and what can be acted on. */
  model: '#006772',
  /** Text on a surface of the model colour. */
  onModel: '#ffffff',
  /** Mass lost. */
  loss: '#b54710',
  /** Mass gained. */
  gain: '#2c6fae',
  observed: '#131e2b',
  /** Observed minus model. */
  residual: '#696e75',
  sea: '#e5eff2',
  land: '#ddd9cc',
  /** The rule beside a caution. A line, not a text colour. */
  caution: '#b17915',
}

/** Screen by night. */
export const dark: Palette = {
  paper: '#11161e',
  wash: '#1a2028',
  ink: '#edebe5',
  soft: '#9ea5ae',
  hairline: '#363e48',
  model: '#56c4ca',
  onModel: '#11161e',
  loss: '#f08e54',
  gain: '#6da9e7',
  observed: '#edebe5',
  residual: '#888d92',
  sea: '#19262f',
  land: '#403d31',
  caution: '#c28e24',
}

/** White paper. */
export const print: Palette = { ...light, paper: '#ffffff', wash: '#f4f3ef', sea: '#edf4f6', land: '#e2ded2' }

export const palettes: Readonly<Record<ThemeName, Palette>> = { light, dark, print }

/** CSS variable of a token, e.g. `--on-model`. */
export function cssName(token: TokenName): string {
  return `--${token.replace(/[A-Z]/g, letter => `-${letter.toLowerCase()}`)}`
}

/** Colours as CSS variables: figures that are drawn into a page follow its theme without being drawn again. */
export const live: Palette = Object.fromEntries(
  tokenNames.map(token => [token, `var(${cssName(token)})`]),
) as Record<TokenName, string>

/** `#131e2b` as `19 30 43`, the form in which Tailwind adds an opacity. */
function channels(hex: string): string {
  return [1, 3, 5].map(at => Number.parseInt(hex.slice(at, at + 2), 16)).join(' ')
}

function declarations(palette: Palette, indent: string): string {
  return tokenNames
    .map(token => `${indent}${cssName(token)}: ${palette[token]};\n${indent}${cssName(token)}-rgb: ${channels(palette[token])};`)
    .join('\n')
}

/**
 * The style sheet of the tokens: light by default, dark where the system asks for it and `data-theme="light"` does not
 * forbid it, dark under `data-theme="dark"`, print colours on paper.
 */
export function cssVariables(): string {
  return [
    `:root {\n  color-scheme: light;\n${declarations(light, '  ')}\n}`,
    `@media (prefers-color-scheme: dark) {\n  :root:not([data-theme="light"]) {\n    color-scheme: dark;\n${declarations(dark, '    ')}\n  }\n}`,
    `:root[data-theme="dark"] {\n  color-scheme: dark;\n${declarations(dark, '  ')}\n}`,
    `@media print {\n  :root, :root[data-theme], :root:not([data-theme="light"]) {\n    color-scheme: light;\n${declarations(print, '    ')}\n  }\n}`,
    '',
  ].join('\n')
}

/** Token → Tailwind colour on the CSS variables: `text-on-model`, `bg-model/10`; with the three that are no colour. */
export const tailwindColors: Readonly<Record<string, string>> = {
  transparent: 'transparent',
  current: 'currentColor',
  inherit: 'inherit',
  ...Object.fromEntries(tokenNames.map(token => [cssName(token).slice(2), `rgb(var(${cssName(token)}-rgb) / <alpha-value>)`])),
}
