/** A published edition for its public page, with what a search engine or a message shows of it. */
export async function useEdition(slug: string, n?: number) {
  const api = useApi()
  const { origin } = useRequestURL()
  const { data, error } = await usePageData(`edition-${slug}-${n ?? 'newest'}`, () => api('editionRead', { params: { slug }, query: n === undefined ? {} : { n } }))
  return { edition: computed(() => data.value ?? null), error, origin }
}
