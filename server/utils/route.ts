import { and, eq } from 'drizzle-orm'
import { defineEventHandler, getCookie, getQuery, getRequestHeader, getRequestProtocol, getRouterParams, setResponseHeader, setResponseStatus, type H3Event } from 'h3'
import type { ZodType } from 'zod'
import type { AnswerOf, BodyOf, Contract, ParamsOf, QueryOf } from '#shared/api/contract'
import { can, type Principal } from '#shared/permissions'
import { InputError, type Issue } from '#shared/types/issue'
import { schema } from '../database/client'
import { sha256Hex } from '../services/hash'
import { workspaceOfRoute } from '../services/rowWorkspace'
import { principalOfSession } from '../services/sessions'
import { principalOfToken } from '../services/tokens'
import { readJson, readMultipart, type Upload } from './body'
import { useContext } from './context'
import { plainFault } from './plainFaults'
import { Problem, problemBody } from './problem'
import type { Context } from '../services/context'

export interface RouteCall<C> {
  event: H3Event
  context: Context
  /** Null only where the contract's action is open to everybody. */
  principal: Principal | null
  params: ParamsOf<C>
  query: QueryOf<C>
  body: BodyOf<C>
  upload: Upload
}

const cookieName = 'counterpoise-session'
const jsonLimit = 1024 * 1024

/**
 * Every route's way in: principal, permission, parameters, body, service, answer, and each failure as problem+json.
 * The permission comes before the body is looked at; services ask again with the row in hand.
 */
export function route<C extends Contract>(contract: C, handle: (call: RouteCall<C>) => Promise<AnswerOf<C>> | AnswerOf<C>) {
  return defineEventHandler(async (event) => {
    let discard: (() => Promise<void>) | undefined
    try {
      const context = useContext()
      const principal = await principalOf(event, context)
      if (!principal && contract.action !== 'public.read') {
        throw bearerToken(event) === null
          ? new Problem(401, 'sign-in', 'This needs an account: sign in first.')
          : new Problem(401, 'token', 'This token is not known here, was revoked, or has run out.')
      }

      const params = parse(contract.params, getRouterParams(event, { decode: true }), 404)
      const workspaceId = workspaceOfRoute(context, contract, params as Record<string, string> | undefined)
      if (workspaceId && !principal?.memberships.some(m => m.workspaceId === workspaceId)) throw new Problem(404, 'not-found', 'There is no such thing here.')
      if (!can(principal, contract.action, { workspaceId })) throw refusedTo(principal)

      const query = parse(contract.query, getQuery(event), 422)
      let body: unknown
      let text = ''
      let upload: Upload | undefined
      if (contract.bodyType === 'multipart') {
        const parts = await readMultipart(event, `${context.dataDir}/incoming`, contract.maxBytes ?? jsonLimit)
        discard = parts.discard
        upload = parts.upload
        body = parse(contract.body, withRevision(event, parts.options), 422)
      }
      else if (contract.body) {
        const json = await readJson(event, contract.maxBytes ?? jsonLimit)
        text = json.text
        body = parse(contract.body, withRevision(event, json.value), 422)
      }

      const repeated = remember(event, context, principal, contract, text)
      if (repeated?.stored) return send(event, contract, repeated.stored)
      const answer = await handle({ event, context, principal, params, query, body, upload } as RouteCall<C>)
      checkAnswer(contract, answer)
      repeated?.store(answer)
      return send(event, contract, answer)
    }
    catch (error) {
      return sendProblem(event, error)
    }
    finally {
      await discard?.()
    }
  })
}

function send(event: H3Event, contract: Contract, answer: unknown) {
  setResponseStatus(event, contract.status ?? 200)
  if (contract.status === 204) return null
  if (contract.answerType) return answer
  setResponseHeader(event, 'content-type', 'application/json; charset=utf-8')
  const revision = (answer as { revision?: number } | null)?.revision
  if (revision !== undefined) setResponseHeader(event, 'etag', `"${revision}"`)
  return JSON.stringify(answer)
}

export function sendProblem(event: H3Event, error: unknown) {
  const body = problemBody(error)
  if (body.status === 500) console.error(`[counterpoise] ${event.method} ${event.path}:`, error)
  setResponseStatus(event, body.status)
  setResponseHeader(event, 'content-type', 'application/problem+json')
  return JSON.stringify(body)
}

function parse(schemaOf: ZodType | undefined, value: unknown, status: 404 | 422): unknown {
  if (!schemaOf) return undefined
  const parsed = schemaOf.safeParse(value ?? {}, { error: plainFault })
  if (parsed.success) return parsed.data
  if (status === 404) throw new Problem(404, 'not-found', 'There is no such thing here.')
  const issues: Issue[] = parsed.error.issues.flatMap(i => i.code === 'unrecognized_keys'
    ? i.keys.map(key => ({ path: [...i.path, key].join('/'), code: 'unknown', message: 'is not known here' }))
    : [{ path: i.path.join('/'), code: i.code as string, message: i.message }])
  throw new InputError(`${issues.length === 1 ? 'One thing does' : `${issues.length} things do`} not hold: ${issues[0]?.path || 'body'}: ${issues[0]?.message}`, issues)
}

/** If-Match stands in for `revision` where the body has none. */
function withRevision(event: H3Event, value: unknown): unknown {
  const match = getRequestHeader(event, 'if-match')?.match(/"(\d+)"/)
  if (!match || typeof value !== 'object' || value === null || 'revision' in value) return value
  return { ...value, revision: Number(match[1]) }
}

/** A POST with an Idempotency-Key is done once: the same request again gets the first answer. */
function remember(event: H3Event, context: Context, principal: Principal | null, contract: Contract, text: string) {
  const key = getRequestHeader(event, 'idempotency-key')
  if (!key || !principal || contract.method !== 'POST' || contract.secret || contract.bodyType === 'multipart') return null
  if (key.length > 200) throw new Problem(422, 'idempotency-key', 'An Idempotency-Key has at most 200 characters.')
  const request = sha256Hex(`${contract.id}\n${event.path}\n${text}`)
  const found = context.db.select().from(schema.idempotency).where(and(eq(schema.idempotency.userId, principal.userId), eq(schema.idempotency.key, key))).get()
  if (found && found.request !== request) throw new Problem(422, 'idempotency-key', 'This Idempotency-Key was used for another request.')
  return {
    stored: found ? JSON.parse(found.answer) as unknown : undefined,
    store: (answer: unknown) => context.db.insert(schema.idempotency).values({
      userId: principal.userId, key, request, status: contract.status ?? 200, answer: JSON.stringify(answer ?? null), createdAt: context.now(),
    }).onConflictDoNothing().run(),
  }
}

/** Under test every answer is held to its contract, so that the OpenAPI document cannot drift from what is sent. */
function checkAnswer(contract: Contract, answer: unknown) {
  if (!process.env.COUNTERPOISE_CHECK_ANSWERS || contract.answerType || !contract.answer) return
  const wire: unknown = answer === undefined ? undefined : JSON.parse(JSON.stringify(answer))
  const parsed = contract.answer.safeParse(wire)
  if (!parsed.success) throw new Error(`answer of ${contract.id} breaks its contract: ${parsed.error.message}`)
}

function refusedTo(principal: Principal | null): Problem {
  return principal?.token
    ? new Problem(403, 'scope', 'This token’s scope, or the role of its person, does not allow this.')
    : new Problem(403, 'role', 'Your role in this workspace does not allow this.')
}

function bearerToken(event: H3Event): string | null {
  return /^Bearer +(\S+)$/i.exec(getRequestHeader(event, 'authorization') ?? '')?.[1] ?? null
}

async function principalOf(event: H3Event, context: Context): Promise<Principal | null> {
  const bearer = bearerToken(event)
  if (bearer !== null) return principalOfToken(context, bearer)
  const token = await sessionToken(event)
  return token ? principalOfSession(context, token) : null
}

/** The secret inside the sealed cookie; visitors without a cookie are not given one. */
export async function sessionToken(event: H3Event): Promise<string | null> {
  // A request with a token is a program's: the cookie of a browser that may be behind it counts for nothing.
  if (!getCookie(event, cookieName) || getRequestHeader(event, 'authorization')) return null
  const session = await getUserSession(event) as { secure?: { token?: string } }
  return session.secure?.token ?? null
}

export async function giveCookie(event: H3Event, token: string) {
  await setUserSession(event, { secure: { token } }, { cookie: { secure: getRequestProtocol(event) === 'https', sameSite: 'lax', httpOnly: true } })
}

export async function takeCookie(event: H3Event) {
  if (getCookie(event, cookieName) && !getRequestHeader(event, 'authorization')) await clearUserSession(event, { cookie: { secure: getRequestProtocol(event) === 'https' } })
}

/** Content-Disposition of a download, names in any script included (RFC 6266). */
export function attachment(name: string) {
  const plain = name.replace(/[^\w.-]+/g, '_')
  return `attachment; filename="${plain}"; filename*=UTF-8''${encodeURIComponent(name)}`
}
