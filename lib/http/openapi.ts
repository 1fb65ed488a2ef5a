import * as z from 'zod'
import { sessionCookieName } from '@/lib/auth/session-cookie'
import { allOperations } from '@/lib/http/all-operations'
import type { AnyOperation } from '@/lib/http/operation'

/** The OpenAPI 3.1 document of every operation; its schemas are JSON Schema 2020-12, made by zod itself. */

type Json = Record<string, unknown>

const problemSchema = z.object({
  type: z.string(),
  title: z.string(),
  status: z.int(),
  detail: z.string(),
  fields: z.record(z.string(), z.string()).optional(),
  current: z.unknown().optional(),
  retryAfterS: z.number().optional(),
  id: z.string().optional(),
})

const problems: Readonly<Record<string, string>> = {
  '400': 'The body is no JSON',
  '401': 'Not signed in, or the session has ended',
  '403': 'The role may not do this, or the write came from another origin',
  '404': 'Nothing here has this address, or it is not yours',
  '409': 'It does not fit what is there now; `current` holds that when the edit was stale',
  '413': 'The body is too large',
  '415': 'Only application/json is taken',
  '422': 'Some fields need mending; `fields` has a sentence for each',
  '429': 'Too many tries; `retryAfterS` says how long to wait',
  '500': 'Our fault; `id` stands in the log',
  '503': 'The database is not answering',
}

function jsonSchema(schema: z.ZodType, io: 'input' | 'output'): Json {
  const { $schema: _, ...rest } = z.toJSONSchema(schema, { io, unrepresentable: 'any' })
  return rest
}

export function buildOpenApi(origin: string): Json {
  const paths: Record<string, Json> = {}
  for (const operation of allOperations) {
    paths[operation.path] = {
      ...paths[operation.path],
      [operation.method.toLowerCase()]: describeOperation(operation),
    }
  }
  return {
    openapi: '3.1.0',
    info: {
      title: 'Emberstave',
      version: '0.1.0',
      description:
        'Toast recipes, firings and their evidence. Temperatures in °C, instants in UTC, durations in seconds. Errors are RFC 9457 problems; lists page by `cursor`.',
      license: { name: 'Apache-2.0', identifier: 'Apache-2.0' },
    },
    servers: [{ url: origin }],
    paths,
    components: {
      schemas: { Problem: jsonSchema(problemSchema, 'output') },
      responses: Object.fromEntries(
        Object.entries(problems).map(([status, description]) => [
          `Problem${status}`,
          problemResponse(description),
        ]),
      ),
      securitySchemes: {
        session: { type: 'apiKey', in: 'cookie', name: sessionCookieName },
        device: { type: 'http', scheme: 'bearer', description: 'The token of a gateway' },
      },
    },
  }
}

function problemResponse(description: string): Json {
  return {
    description,
    content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } },
  }
}

function describeOperation(operation: AnyOperation): Json {
  const parameters = [...parametersOf(operation.params, 'path'), ...parametersOf(operation.query, 'query')]
  return {
    operationId: operation.id,
    summary: operation.summary,
    tags: [operation.tag],
    security: securityOf(operation),
    ...(typeof operation.access === 'string' ? {} : { 'x-roles': operation.access }),
    ...(parameters.length === 0 ? {} : { parameters }),
    ...requestBodyOf(operation),
    responses: { [String(successStatus(operation))]: successResponse(operation), ...problemsOf(operation) },
  }
}

function requestBodyOf(operation: AnyOperation): Json {
  if (operation.fileBody !== undefined) {
    const content = Object.fromEntries(operation.fileBody.map((type) => [type, { schema: {} }]))
    return { requestBody: { required: true, content } }
  }
  if (operation.body === undefined) return {}
  const content = { 'application/json': { schema: jsonSchema(operation.body, 'input') } }
  return { requestBody: { required: true, content } }
}

function securityOf(operation: AnyOperation): Json[] {
  if (operation.access === 'public') return []
  return [operation.access === 'gateway' ? { device: [] } : { session: [] }]
}

export function successStatus(operation: AnyOperation): number {
  if (operation.status !== undefined) return operation.status
  return operation.response === undefined && operation.responseType === undefined ? 204 : 200
}

function successResponse(operation: AnyOperation): Json {
  const type = operation.responseType ?? 'application/json'
  if (operation.response === undefined) {
    return type === 'application/json'
      ? { description: 'Done' }
      : { description: 'The file', content: { [type]: { schema: { type: 'string' } } } }
  }
  return {
    description: 'The answer',
    content: { [type]: { schema: jsonSchema(operation.response, 'output') } },
  }
}

function problemsOf(operation: AnyOperation): Json {
  const isWrite = operation.method !== 'GET'
  const statuses = [
    ...(operation.body === undefined ? [] : ['400', '413', '415']),
    ...(operation.fileBody === undefined ? [] : ['413']),
    ...(operation.access === 'public' ? [] : ['401']),
    ...(isWrite || operation.access !== 'public' ? ['403'] : []),
    ...(operation.params === undefined ? [] : ['404']),
    ...(isWrite ? ['409'] : []),
    ...(operation.body === undefined && operation.query === undefined ? [] : ['422']),
    ...(isWrite ? ['429'] : []),
    '500',
    '503',
  ]
  return Object.fromEntries(
    statuses.map((status) => [status, { $ref: `#/components/responses/Problem${status}` }]),
  )
}

/** One parameter a property; what an empty query is refused for is required. */
function parametersOf(schema: z.ZodType | undefined, place: 'path' | 'query'): Json[] {
  if (schema === undefined) return []
  const { properties } = jsonSchema(schema, 'output')
  if (typeof properties !== 'object' || properties === null) return []
  const empty = schema.safeParse({})
  const missing = new Set(empty.success ? [] : empty.error.issues.map((issue) => String(issue.path[0])))
  return Object.entries(properties).map(([name, property]) => ({
    name,
    in: place,
    required: place === 'path' || missing.has(name),
    schema: property,
  }))
}
