import type { ZodType, output } from 'zod'
import type { Action } from '../permissions.ts'

export type Method = 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE'

/** One route: the handler wrapper, the typed client, the OpenAPI document and the permission walk all read this. */
export interface Contract<
  P extends ZodType = ZodType, Q extends ZodType = ZodType, B extends ZodType = ZodType, A extends ZodType = ZodType,
> {
  id: string
  method: Method
  /** Path with parameters in braces, as in OpenAPI. */
  path: string
  action: Action
  summary: string
  params?: P
  query?: Q
  body?: B
  /** How the body comes: JSON, or multipart with a `file` part and an `options` part that holds the JSON body. */
  bodyType?: 'json' | 'multipart'
  answer?: A
  /** Media type of the answer; JSON when left out. */
  answerType?: string
  status?: number
  /** The answer holds a secret: it is not kept for a repeated request. */
  secret?: boolean
  /** Largest body in bytes. */
  maxBytes?: number
}

export function contract<P extends ZodType, Q extends ZodType, B extends ZodType, A extends ZodType>(c: Contract<P, Q, B, A>) {
  return c
}

export type ParamsOf<C> = C extends Contract<infer P, ZodType, ZodType, ZodType> ? output<P> : never
export type QueryOf<C> = C extends Contract<ZodType, infer Q, ZodType, ZodType> ? output<Q> : never
export type BodyOf<C> = C extends Contract<ZodType, ZodType, infer B, ZodType> ? output<B> : never
export type AnswerOf<C> = C extends Contract<ZodType, ZodType, ZodType, infer A> ? output<A> : never
