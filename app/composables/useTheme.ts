export type Theme = 'system' | 'light' | 'dark'

/** The reader's choice of light or dark, kept in a cookie so that the first paint has it. */
export function useTheme() {
  // No default of the cookie's own: it would be set for everybody who only looks.
  const chosen = useCookie<Theme | null>('theme', { sameSite: 'lax', maxAge: 365 * 24 * 3600 })
  const theme = computed<Theme>(() => chosen.value ?? 'system')
  return {
    theme,
    next: () => { chosen.value = ({ system: 'light', light: 'dark', dark: 'system' } as const)[theme.value] ?? 'system' },
  }
}
