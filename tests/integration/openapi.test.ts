import { beforeAll, describe, expect, inject, it } from 'vitest'
import { contracts } from '#shared/api/contracts'
import { Client } from '../support/client'

const url = inject('url')
interface Operation { operationId: string, summary: string, parameters: { name: string, in: string, required: boolean, schema: object }[], requestBody?: { content: Record<string, { schema: object }> }, responses: Record<string, { description: string, content?: Record<string, { schema: object }> }>, security?: object[] }
let text: string
let document: { openapi: string, info: { title: string, version: string }, paths: Record<string, Record<string, Operation>>, components: { schemas: Record<string, object>, securitySchemes: Record<string, object> } }

beforeAll(async () => {
  const answer = await new Client(url).call('openapi')
  text = answer.text
  document = answer.json as typeof document
})

describe('openapi.json', () => {
  it('lists every contract, and nothing else', () => {
    const listed = Object.entries(document.paths).flatMap(([path, item]) => Object.entries(item).map(([method, op]) => `${op.operationId}: ${method.toUpperCase()} ${path}`))
    expect(listed.sort()).toEqual(Object.values(contracts).map(c => `${c.id}: ${c.method} ${c.path}`).sort())
  })

  it('is valid OpenAPI 3.1', async () => {
    expect(document.openapi).toMatch(/^3\.1\.\d$/)
    const { Validator } = await import('@seriousme/openapi-schema-validator')
    const { valid, errors } = await new Validator().validate(JSON.parse(text) as Record<string, unknown>)
    expect(errors ?? []).toEqual([])
    expect(valid).toBe(true)
  })

  it('has a parameter for each name in a path, and each reference leads somewhere', () => {
    for (const [path, item] of Object.entries(document.paths)) {
      const names = [...path.matchAll(/\{(\w+)\}/g)].map(m => m[1])
      for (const op of Object.values(item)) expect(op.parameters.filter(p => p.in === 'path').map(p => p.name), op.operationId).toEqual(names)
    }
    for (const [, reference] of text.matchAll(/"\$ref":"(#[^"]*)"/g)) {
      const target = reference!.split('/').slice(1).reduce<unknown>((node, key) => (node as Record<string, unknown> | undefined)?.[key.replaceAll('~1', '/')], document)
      expect(target, reference).toBeDefined()
    }
  })

  it('says how each can fail, which are open, and how to sign in', () => {
    for (const item of Object.values(document.paths)) {
      for (const op of Object.values(item)) {
        expect(op.responses.default!.content, op.operationId).toHaveProperty(['application/problem+json'])
        const { action } = Object.values(contracts).find(c => c.id === op.operationId)!
        expect(op.security, op.operationId).toEqual(action === 'public.read' ? [] : action === 'account.manage' ? [{ session: [] }] : undefined)
      }
    }
    expect(document.components.securitySchemes.session).toEqual({ type: 'apiKey', in: 'cookie', name: 'counterpoise-session' })
  })

  it('describes evaluate’s request with its settings', () => {
    const { schema } = document.paths['/api/v1/evaluate']!.post!.requestBody!.content['application/json']!
    expect(JSON.stringify(schema)).toContain('"fingerprint-rotation"')
  })
})
