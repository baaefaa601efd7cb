import { calls } from '#build/calls'
import type { contracts, ContractId } from '#shared/api/contracts'
import type { AnswerOf, BodyOf, ParamsOf, QueryOf } from '#shared/api/contract'
import type { Issue } from '#shared/types/issue'

/** A refusal by the server, in the words that it gave. */
export class ApiProblem extends Error {
  readonly status: number
  readonly code: string
  readonly issues: Issue[]

  constructor(status: number, code: string, detail: string, issues: Issue[]) {
    super(detail)
    this.name = 'ApiProblem'
    this.status = status
    this.code = code
    this.issues = issues
  }
}

export type CallOptions<C> =
  & ([ParamsOf<C>] extends [never] ? object : unknown extends ParamsOf<C> ? object : { params: ParamsOf<C> })
  & { query?: Partial<QueryOf<C>>, body?: [BodyOf<C>] extends [never] ? undefined : Partial<BodyOf<C>>, file?: File | Blob, fileName?: string, signal?: AbortSignal }

export function apiPath(path: string, params: Record<string, unknown> = {}): string {
  return path.replace(/\{(\w+)\}/g, (_, name: string) => encodeURIComponent(String(params[name])))
}

/**
 * The typed client of the contracts list, and the only caller of $fetch. On the server it passes on the visitor's cookie.
 *
 * `await api('regionRead', { params: { id } })`
 */
export function useApi() {
  const fetcher: (path: string, options: object) => Promise<unknown> = import.meta.server ? useRequestFetch() as typeof $fetch : $fetch
  return async function api<K extends ContractId>(id: K, options: CallOptions<(typeof contracts)[K]> = {} as never): Promise<AnswerOf<(typeof contracts)[K]>> {
    const call = calls[id]
    const { params, query, body, file, fileName, signal } = options as { params?: Record<string, unknown>, query?: Record<string, unknown>, body?: unknown, file?: Blob, fileName?: string, signal?: AbortSignal }
    let sent = body
    if (call.bodyType === 'multipart' && file) {
      const form = new FormData()
      form.append('options', JSON.stringify(body ?? {}))
      form.append('file', file, fileName ?? (file as File).name)
      sent = form
    }
    try {
      return await fetcher(apiPath(call.path, params), {
        method: call.method, query, body: sent, signal, retry: 0, responseType: 'json',
      }) as AnswerOf<(typeof contracts)[K]>
    }
    catch (error) {
      throw asProblem(error)
    }
  }
}

function asProblem(error: unknown): unknown {
  const e = error as { name?: string, statusCode?: number, data?: { detail?: string, code?: string, issues?: Issue[] } }
  if (e?.name === 'AbortError') return error
  if (e?.statusCode === undefined) return new ApiProblem(0, 'offline', 'The server cannot be reached. What you entered is still here; try again.', [])
  let data = e.data
  if (typeof data === 'string') {
    try { data = JSON.parse(data) as typeof data }
    catch { data = undefined }
  }
  return new ApiProblem(e.statusCode, data?.code ?? 'unknown', data?.detail ?? 'The server answered with an error.', data?.issues ?? [])
}

/** The text to show for whatever was thrown. */
export function problemText(error: unknown): string {
  return error instanceof Error ? error.message : 'Something failed.'
}
