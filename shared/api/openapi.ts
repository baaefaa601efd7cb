import { z, type ZodType } from 'zod'
import { contractList } from './contracts.ts'
import type { Contract } from './contract.ts'
import { problem } from './schemas.ts'

type Json = Record<string, unknown>

type Components = Record<string, Json>

/** JSON Schema of a zod schema; parts that have a name go to the document's components. */
function schemaOf(type: ZodType, io: 'input' | 'output', components: Components): Json {
  const { $schema: _, $defs, ...schema } = z.toJSONSchema(type, { io, unrepresentable: 'any', reused: 'inline' }) as Json & { $defs?: Record<string, Json> }
  for (const [name, part] of Object.entries($defs ?? {})) components[name] = pointed(part)
  return pointed(schema)
}

const pointed = (schema: Json) => JSON.parse(JSON.stringify(schema).replaceAll('"#/$defs/', '"#/components/schemas/')) as Json

/** Properties of an object schema, as OpenAPI parameters. */
function parameters(type: ZodType | undefined, place: 'path' | 'query', components: Components): Json[] {
  if (!type) return []
  const { properties = {}, required = [] } = schemaOf(type, 'input', components) as { properties?: Record<string, Json>, required?: string[] }
  return Object.entries(properties).map(([name, schema]) => ({ name, in: place, required: place === 'path' || required.includes(name), schema }))
}

function requestBody(c: Contract, components: Components): Json | undefined {
  if (!c.body) return undefined
  const schema = schemaOf(c.body, 'input', components)
  if (c.bodyType !== 'multipart') return { required: true, content: { 'application/json': { schema } } }
  return {
    required: true,
    content: {
      'multipart/form-data': {
        schema: { type: 'object', required: ['file'], properties: { file: { type: 'string', format: 'binary' }, options: schema } },
        encoding: { options: { contentType: 'application/json' } },
      },
    },
  }
}

function operation(c: Contract, components: Components): Json {
  const type = c.answerType ?? 'application/json'
  const empty = c.status === 204
  const open = c.action === 'public.read'
  return {
    operationId: c.id,
    summary: c.summary,
    tags: [c.path.split('/')[3]],
    parameters: [...parameters(c.params, 'path', components), ...parameters(c.query, 'query', components)],
    ...(c.body ? { requestBody: requestBody(c, components) } : {}),
    ...(open ? { security: [] } : c.action === 'account.manage' ? { security: [{ session: [] }] } : {}),
    responses: {
      [String(c.status ?? 200)]: empty
        ? { description: 'Done' }
        : { description: c.summary, content: { [type]: { schema: c.answer && !c.answerType ? schemaOf(c.answer, 'output', components) : { type: 'string', format: 'binary' } } } },
      default: { description: 'What went wrong, and where', content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } } },
    },
    'x-action': c.action,
  }
}

/** The interface as an OpenAPI 3.1 document, made from the contracts list and nothing else. */
export function openApiDocument(): Json {
  const paths: Record<string, Json> = {}
  const schemas: Components = {}
  schemaOf(problem, 'output', schemas)
  for (const c of contractList) (paths[c.path] ??= {})[c.method.toLowerCase()] = operation(c, schemas)
  return {
    openapi: '3.1.0',
    info: { title: 'Counterpoise', version: '1', description: 'Regional mass change and what it does to the Earth’s spin and pole. Units and signs stand in every name: Gt, mas, microseconds, mm.' },
    servers: [{ url: '/' }],
    security: [{ session: [] }, { token: [] }],
    paths,
    components: {
      schemas,
      securitySchemes: {
        session: { type: 'apiKey', in: 'cookie', name: 'counterpoise-session' },
        token: { type: 'http', scheme: 'bearer', description: 'A token that a person makes on their account page, for reading or for all that the person may; never for the account itself.' },
      },
    },
  }
}
