export type Theme = 'system' | 'light' | 'dark'

/** The reader's choice of light or dark, kept in a cookie so that the first paint has it. */
export function useTheme() {
  const theme = useCookie<Theme>('theme', { default: () => 'system', sameSite: 'lax', maxAge: 365 * 24 * 3600 })
  return {
    theme,
    next: () => { theme.value = ({ system: 'light', light: 'dark', dark: 'system' } as const)[theme.value] ?? 'system' },
  }
}
