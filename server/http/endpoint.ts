import type { z } from 'zod'
import type { Permission } from '#shared/permissions.ts'
import type { Actor } from './actor.ts'
import type { Client } from './client.ts'
import type { FileAnswer } from './file-answer.ts'

export type Method = 'get' | 'post' | 'put' | 'patch' | 'delete'

/** A file that came with the request, on disk until the handler returns. */
export interface UploadedFile {
  path: string
  originalName: string
  sizeBytes: number
}

/** What a handler gets: everything parsed, nothing of Express. */
export interface Call<P, Q, B> {
  params: P
  query: Q
  body: B
  file: UploadedFile | undefined
  client: Client
  /** Aborted when the client goes away. */
  signal: AbortSignal
}

export interface SignedInCall<P, Q, B> extends Call<P, Q, B> {
  actor: Actor
}

type Reply<A> = A | Promise<A>

interface Shape<P, Q, B> {
  method: Method
  /** Below /api, with `:name` for parameters. */
  path: string
  summary: string
  params?: z.ZodType<P>
  query?: z.ZodType<Q>
  body?: z.ZodType<B>
  /** A multipart request with one file in the field `file`; the other fields are the body. */
  upload?: { maxBytes: number }
  /** The statuses of the problems that this endpoint answers on purpose, beside 401, 403 and 422. */
  problems?: readonly number[]
}

type Answer<A> =
  { status: 200 | 201 | 202; schema: z.ZodType<A> } | { status: 204 } | { status: 200; file: string } | { status: 200; stream: string }

interface SignedInShape<P, Q, B, A> extends Shape<P, Q, B> {
  /** The permission that the caller must hold at some site; the service checks the record's own site. `signed-in` asks for a session alone. */
  allow: Permission | 'signed-in'
  /** Records something: an Idempotency-Key is required, and a retry gets the first answer. */
  idempotent?: boolean
  answer: Answer<A>
  handle: (call: SignedInCall<P, Q, B>) => Reply<A | FileAnswer | undefined>
}

interface OpenShape<P, Q, B, A> extends Shape<P, Q, B> {
  answer: Answer<A>
  handle: (call: Call<P, Q, B>) => Reply<A | FileAnswer | undefined>
}

/** The request as it came, before any schema has seen it. */
export interface RawCall {
  actor: Actor | undefined
  params: unknown
  query: unknown
  body: unknown
  file: UploadedFile | undefined
  client: Client
  signal: AbortSignal
}

/** One endpoint, read by the router, the API description and the role table of the tests. */
export interface Endpoint {
  method: Method
  path: string
  summary: string
  allow: Permission | 'signed-in' | 'anyone'
  idempotent: boolean
  upload: { maxBytes: number } | undefined
  schemas: { params: z.ZodType | undefined; query: z.ZodType | undefined; body: z.ZodType | undefined; answer: z.ZodType | undefined }
  status: number
  /** The media type of an answer that is a file or a stream. */
  mediaType: string | undefined
  problems: readonly number[]
  run: (raw: RawCall) => Promise<unknown>
}

async function parse<T>(part: 'params' | 'query' | 'body', schema: z.ZodType<T> | undefined, value: unknown): Promise<T> {
  // Without a schema the handler's type for this part is `unknown`, which `undefined` satisfies.
  if (!schema) return undefined as T
  const parsed = await schema.safeParseAsync(value, { reportInput: true })
  if (parsed.success) return parsed.data
  throw new RequestDoesNotFitError(part, parsed.error)
}

/** A part of the request that does not fit its schema; the mapping to a problem names every field. */
export class RequestDoesNotFitError extends Error {
  constructor(
    readonly part: 'params' | 'query' | 'body',
    readonly zodError: z.ZodError,
  ) {
    super(`The ${part} of the request does not fit its schema.`)
  }
}

async function parseCall<P, Q, B>(shape: Shape<P, Q, B>, raw: RawCall): Promise<Call<P, Q, B>> {
  return {
    params: await parse('params', shape.params, raw.params),
    query: await parse('query', shape.query, raw.query),
    body: await parse('body', shape.body, raw.body),
    file: raw.file,
    client: raw.client,
    signal: raw.signal,
  }
}

function describe<P, Q, B, A>(shape: Shape<P, Q, B> & { answer: Answer<A> }): Omit<Endpoint, 'allow' | 'idempotent' | 'run'> {
  const { method, path, summary, params, query, body, upload, answer, problems = [] } = shape
  const schema = 'schema' in answer ? answer.schema : undefined
  const mediaType = 'file' in answer ? answer.file : 'stream' in answer ? answer.stream : undefined
  return { method, path, summary, upload, schemas: { params, query, body, answer: schema }, status: answer.status, mediaType, problems }
}

/** An endpoint for people who are signed in. */
export function endpoint<P, Q, B, A>(shape: SignedInShape<P, Q, B, A>): Endpoint {
  return {
    ...describe(shape),
    allow: shape.allow,
    idempotent: shape.idempotent ?? false,
    run: async (raw) => {
      if (!raw.actor) throw new Error(`${shape.method} ${shape.path} ran without an actor.`)
      return shape.handle({ ...(await parseCall(shape, raw)), actor: raw.actor })
    },
  }
}

/** An endpoint that answers without a session: sign-in, health and the like. */
export function openEndpoint<P, Q, B, A>(shape: OpenShape<P, Q, B, A>): Endpoint {
  return {
    ...describe(shape),
    allow: 'anyone',
    idempotent: false,
    run: async (raw) => shape.handle(await parseCall(shape, raw)),
  }
}
