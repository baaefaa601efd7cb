import type { AsyncDataOptions } from '#app'

interface Refusal { code: string, issues: unknown[] }

/**
 * Data that a page stands on, fetched on the server too. What does not exist, or is not for this role, becomes the page that says so; any other failure
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
  const refused = error.value?.statusCode
  if (refused === 404 || refused === 403) throw createError({ statusCode: refused, fatal: true })
  return { data, error, status, refresh: () => refresh() }
}
