import type { AsyncDataOptions } from '#app'

interface Refusal { code: string, issues: unknown[] }

/**
 * Data that a page stands on, fetched on the server too. What does not exist becomes the page “not found”; any other failure
 * is left to the page, with its words and its status.
 */
export async function usePageData<T>(key: string, load: () => Promise<T>, options: AsyncDataOptions<T> = {}) {
  const asked = useAsyncData(key, async () => {
    try {
      return await load()
    }
    catch (error) {
      throw error instanceof ApiProblem
        ? createError({ statusCode: error.status || 503, message: error.message, data: { code: error.code, issues: error.issues } satisfies Refusal })
        : error
    }
  }, options as AsyncDataOptions<T, T>)
  const { data, error, status, refresh } = await asked
  if (error.value?.statusCode === 404) throw createError({ statusCode: 404, fatal: true })
  return { data, error, status, refresh: () => refresh() }
}
