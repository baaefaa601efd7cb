/** Light or dark as the page shows it: the reader's choice, or the system's where there is none. In the browser only. */
export function useShownTheme() {
  const { theme } = useTheme()
  const systemDark = ref(false)
  let query: MediaQueryList | null = null
  const follow = (): void => { systemDark.value = query?.matches ?? false }
  onMounted(() => {
    query = matchMedia('(prefers-color-scheme: dark)')
    follow()
    query.addEventListener('change', follow)
  })
  onBeforeUnmount(() => query?.removeEventListener('change', follow))
  return computed<'light' | 'dark'>(() => theme.value === 'system' ? (systemDark.value ? 'dark' : 'light') : theme.value)
}
