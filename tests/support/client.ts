import { contracts, type ContractId } from '#shared/api/contracts'
import type { AnswerOf } from '#shared/api/contract'

declare module 'vitest' {
  /** What serverSetup.ts hands to every test file. */
  export interface ProvidedContext { url: string, dataDir: string }
}

export interface Answer<T = unknown> { status: number, headers: Headers, text: string, json: T }
export interface ProblemJson { type: string, title: string, status: number, code: string, detail: string, issues?: { path?: string, row?: number, column?: string, code: string, message: string }[] }

interface Call {
  params?: Record<string, string | number>
  query?: Record<string, string | number | undefined>
  body?: unknown
  /** Sent as multipart with the body as `options`. */
  file?: { name: string, content: string | Uint8Array }
  headers?: Record<string, string>
}

/** The path of a contract with its parameters filled in. */
export function pathOf(id: ContractId, params: Call['params'] = {}, query: Call['query'] = {}) {
  const path = contracts[id].path.replace(/\{(\w+)\}/g, (_, name: string) => encodeURIComponent(String(params[name] ?? 'missing')))
  const search = new URLSearchParams(Object.entries(query).flatMap(([key, value]) => value === undefined ? [] : [[key, String(value)]])).toString()
  return search ? `${path}?${search}` : path
}

/** Somebody who talks to the server over HTTP and keeps the session cookie, as a browser or a script would. */
export class Client {
  cookie = ''

  constructor(readonly url: string) {}

  async send(method: string, path: string, { body, file, headers = {} }: Omit<Call, 'params' | 'query'> = {}): Promise<Answer> {
    const init: RequestInit = { method, headers: { ...(this.cookie ? { cookie: this.cookie } : {}), ...headers }, redirect: 'manual' }
    if (file) {
      const form = new FormData()
      form.set('options', JSON.stringify(body ?? {}))
      form.set('file', new Blob([file.content as BlobPart]), file.name)
      init.body = form
    }
    else if (body !== undefined) {
      init.body = typeof body === 'string' ? body : JSON.stringify(body)
      init.headers = { 'content-type': 'application/json', ...init.headers }
    }
    const response = await fetch(`${this.url}${path}`, init)
    for (const set of response.headers.getSetCookie()) {
      const pair = set.split(';')[0]!
      if (pair.startsWith('counterpoise-session=')) this.cookie = pair.endsWith('=') || /max-age=0(;|$)/i.test(set) ? '' : pair
    }
    const text = await response.text()
    return { status: response.status, headers: response.headers, text, json: parsed(text) }
  }

  /** Calls a route of the contracts list, whatever it answers. */
  call(id: ContractId, call: Call = {}): Promise<Answer> {
    return this.send(contracts[id].method, pathOf(id, call.params, call.query), call)
  }

  /** Calls a route that must succeed and gives its answer. */
  async get<I extends ContractId>(id: I, call: Call = {}): Promise<AnswerOf<typeof contracts[I]>> {
    const answer = await this.call(id, call)
    if (answer.status !== ((contracts[id] as { status?: number }).status ?? 200)) throw new Error(`${id} answered ${answer.status}: ${answer.text.slice(0, 2000)}`)
    return answer.json as AnswerOf<typeof contracts[I]>
  }

  /** Calls a route that must refuse, and gives its problem after a look at its shape. */
  async refused(id: ContractId, status: number, call: Call = {}): Promise<ProblemJson> {
    return problemOf(await this.call(id, call), status)
  }
}

export function problemOf(answer: Answer, status: number): ProblemJson {
  const type = answer.headers.get('content-type') ?? ''
  const problem = answer.json as ProblemJson
  if (answer.status !== status) throw new Error(`expected ${status}, got ${answer.status}: ${answer.text.slice(0, 2000)}`)
  if (!type.startsWith('application/problem+json')) throw new Error(`a refusal must be problem+json, got ${type}`)
  if (problem.status !== status || !problem.type || !problem.title || !problem.code || !problem.detail) throw new Error(`the problem is not complete: ${answer.text}`)
  if (/node_modules|\.(ts|mjs):\d|at \w+ \(/.test(answer.text)) throw new Error(`the problem tells of the inside: ${answer.text}`)
  return problem
}

function parsed(text: string): unknown {
  try {
    return JSON.parse(text)
  }
  catch {
    return undefined
  }
}

export const demoPassword = 'counterpoise-demo'

export async function signIn(url: string, email: string, password = demoPassword): Promise<Client> {
  const client = new Client(url)
  await client.get('sessionCreate', { body: { email, password } })
  if (!client.cookie) throw new Error('signing in gave no cookie')
  return client
}

/** One of the demo's people: admin, lead, hydrologist, glaciologist or reader. */
export const demo = (url: string, mailbox: string) => signIn(url, `${mailbox}@demo.example`)
