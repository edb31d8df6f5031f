import { STATUS_CODES } from 'node:http'
import { z } from 'zod'
import type { Endpoint } from './endpoint.ts'

type Json = Record<string, unknown>

const PROBLEM_SCHEMA: Json = {
  type: 'object',
  required: ['type', 'title', 'status'],
  properties: {
    type: { type: 'string', description: 'What kind of problem, as a path that stays the same.' },
    title: { type: 'string', description: 'One sentence for a person.' },
    status: { type: 'integer' },
    requestId: { type: 'string' },
    issues: {
      type: 'array',
      items: { type: 'object', properties: { pointer: { type: 'string' }, message: { type: 'string' }, found: { type: 'string' } } },
    },
  },
}

/** JSON Schemas of everything with an id go to the components; the rest is written where it is used. */
class SchemaBook {
  readonly components: Json = { Problem: PROBLEM_SCHEMA }

  reference(schema: z.ZodType, io: 'input' | 'output'): Json {
    const { $defs = {}, $schema, ...own } = z.toJSONSchema(schema, { target: 'draft-2020-12', io, unrepresentable: 'any' })
    void $schema
    const moved = (value: unknown): unknown => JSON.parse(JSON.stringify(value).replaceAll('"#/$defs/', '"#/components/schemas/'))
    for (const [id, definition] of Object.entries($defs)) this.components[id] ??= moved(definition)
    const id = schema.meta()?.id
    if (id === undefined) return asJson(moved(own))
    this.components[id] ??= moved(own)
    return { $ref: `#/components/schemas/${id}` }
  }
}

function asJson(value: unknown): Json {
  return typeof value === 'object' && value !== null ? { ...value } : {}
}

function parameters(book: SchemaBook, place: 'path' | 'query', schema: z.ZodType | undefined): Json[] {
  if (!(schema instanceof z.ZodObject)) return []
  const shape: Readonly<Record<string, z.core.$ZodType>> = schema.shape
  return Object.entries(shape).map(([name, part]) => {
    const isOptional = part instanceof z.ZodOptional || part instanceof z.ZodDefault
    return {
      name,
      in: place,
      required: place === 'path' || !isOptional,
      schema: part instanceof z.ZodType ? book.reference(part, 'input') : {},
    }
  })
}

function requestBody(book: SchemaBook, endpoint: Endpoint): Json | undefined {
  const { body } = endpoint.schemas
  if (endpoint.upload) {
    const fields = body ? book.reference(body, 'input') : {}
    const file = {
      type: 'object',
      required: ['file'],
      properties: { file: { type: 'string', format: 'binary', maxLength: endpoint.upload.maxBytes } },
    }
    return { required: true, content: { 'multipart/form-data': { schema: { allOf: [file, fields] } } } }
  }
  return body && { required: true, content: { 'application/json': { schema: book.reference(body, 'input') } } }
}

function responses(book: SchemaBook, endpoint: Endpoint): Json {
  const { schemas, status, mediaType, problems } = endpoint
  const content = schemas.answer
    ? { 'application/json': { schema: book.reference(schemas.answer, 'output') } }
    : mediaType === undefined
      ? undefined
      : { [mediaType]: { schema: { type: 'string' } } }
  const refusals = new Set([422, 500, 503, ...(endpoint.allow === 'anyone' ? [] : [401, 403]), ...problems])
  const problem = { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } }
  return {
    [status]: { description: STATUS_CODES[status] ?? 'Answer', ...(content ? { content } : {}) },
    ...Object.fromEntries([...refusals].sort().map((code) => [code, { description: STATUS_CODES[code] ?? 'Problem', content: problem }])),
  }
}

function operation(book: SchemaBook, endpoint: Endpoint): Json {
  const body = requestBody(book, endpoint)
  const keyHeader = { name: 'Idempotency-Key', in: 'header', required: true, schema: { type: 'string', minLength: 8, maxLength: 80 } }
  return {
    summary: endpoint.summary,
    tags: [endpoint.path.split('/')[1] ?? ''],
    ...(endpoint.allow === 'anyone' ? { security: [] } : { 'x-permission': endpoint.allow }),
    parameters: [
      ...parameters(book, 'path', endpoint.schemas.params),
      ...parameters(book, 'query', endpoint.schemas.query),
      ...(endpoint.idempotent ? [keyHeader] : []),
    ],
    ...(body ? { requestBody: body } : {}),
    responses: responses(book, endpoint),
  }
}

/** The OpenAPI 3.1 description of the endpoints, generated from their schemas so that it cannot drift from them. */
export function describeApi(endpoints: readonly Endpoint[], version: string): Json {
  const book = new SchemaBook()
  const paths: Record<string, Json> = {}
  for (const endpoint of endpoints) {
    const path = endpoint.path.replace(/:(\w+)/g, '{$1}')
    paths[path] = { ...paths[path], [endpoint.method]: operation(book, endpoint) }
  }
  return {
    openapi: '3.1.0',
    info: { title: 'Scruple', version, description: 'Fill-weight control for capsule lines.' },
    servers: [{ url: '/api' }],
    security: [{ bearer: [] }],
    paths,
    components: { schemas: book.components, securitySchemes: { bearer: { type: 'http', scheme: 'bearer', bearerFormat: 'JWT' } } },
  }
}
