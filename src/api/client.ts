import type { SignedIn } from '#shared/schemas/auth.ts'
import { ApiProblem, offlineProblem } from './api-problem.ts'

type Query = Readonly<Record<string, string | number | boolean | undefined>>

export interface RequestOptions {
  query?: Query
  signal?: AbortSignal
  /** The same over all retries of one deed, so that nothing is recorded twice. A POST without one gets a fresh key. */
  idempotencyKey?: string
}

let accessToken: string | undefined
let refreshing: Promise<SignedIn | undefined> | undefined
let onSignedOut: () => void = () => undefined

/** The token lives in memory alone; a reload asks the cookie for a new one. */
export function setAccessToken(token: string | undefined): void {
  accessToken = token
}

/** What happens when the server says that the session is over. */
export function whenSignedOut(listener: () => void): void {
  onSignedOut = listener
}

/** A key for one deed; `randomUUID` exists only in secure contexts. */
export function newIdempotencyKey(): string {
  if (typeof crypto.randomUUID === 'function') return crypto.randomUUID()
  return Array.from(crypto.getRandomValues(new Uint8Array(16)), (byte) => byte.toString(16).padStart(2, '0')).join('')
}

function addressOf(path: string, query: Query = {}): string {
  const parameters = new URLSearchParams()
  for (const [name, value] of Object.entries(query)) if (value !== undefined) parameters.set(name, String(value))
  const text = parameters.toString()
  return `/api${path}${text === '' ? '' : `?${text}`}`
}

async function send(address: string, init: RequestInit): Promise<Response> {
  try {
    return await fetch(address, { credentials: 'same-origin', ...init })
  } catch (error) {
    if (init.signal?.aborted) throw error
    throw offlineProblem()
  }
}

async function problemOf(response: Response): Promise<ApiProblem> {
  const isProblem = response.headers.get('content-type')?.includes('json') === true
  if (!isProblem)
    return response.status >= 502
      ? offlineProblem()
      : new ApiProblem({ title: 'The server gave an unreadable answer.', status: response.status })
  const facts: unknown = await response.json()
  return new ApiProblem(typeof facts === 'object' && facts !== null ? { ...facts } : { status: response.status })
}

/** One refresh for however many requests found their token too old. */
export function refreshSession(): Promise<SignedIn | undefined> {
  refreshing ??= exchangeCookie().finally(() => {
    refreshing = undefined
  })
  return refreshing
}

async function exchangeCookie(): Promise<SignedIn | undefined> {
  const response = await send('/api/auth/refresh', { method: 'POST', headers: { 'X-Scruple-Refresh': '1' } })
  if (!response.ok) {
    if (response.status === 401 || response.status === 403) return undefined
    throw await problemOf(response)
  }
  // The server validates its answers against the schema that this type is inferred from.
  const signedIn = (await response.json()) as SignedIn
  accessToken = signedIn.accessToken
  return signedIn
}

function withToken(init: RequestInit): RequestInit {
  const headers = new Headers(init.headers)
  if (accessToken !== undefined) headers.set('Authorization', `Bearer ${accessToken}`)
  return { ...init, headers }
}

/** Sends with the token; an expired one is renewed once without a word. */
async function authorised(address: string, init: RequestInit): Promise<Response> {
  const first = await send(address, withToken(init))
  if (first.status !== 401 || address.startsWith('/api/auth/sign-in')) return checked(first)
  if ((await refreshSession()) === undefined) {
    accessToken = undefined
    onSignedOut()
    throw await problemOf(first)
  }
  return checked(await send(address, withToken(init)))
}

async function checked(response: Response): Promise<Response> {
  if (!response.ok) throw await problemOf(response)
  return response
}

async function call<T>(method: string, path: string, body: unknown, { query, signal, idempotencyKey }: RequestOptions): Promise<T> {
  const headers = new Headers({ Accept: 'application/json' })
  if (body !== undefined) headers.set('Content-Type', 'application/json')
  if (method === 'POST') headers.set('Idempotency-Key', idempotencyKey ?? newIdempotencyKey())
  const init = { method, headers, ...(body === undefined ? {} : { body: JSON.stringify(body) }), ...(signal ? { signal } : {}) }
  const response = await authorised(addressOf(path, query), init)
  // An empty answer is `undefined` for callers that expect nothing; the server validates all others against their schema.
  return (response.status === 204 ? undefined : await response.json()) as T
}

/** The only way to the server: credentials, renewal, retry keys and problems are settled here. */
export const api = {
  get: <T>(path: string, options: RequestOptions = {}) => call<T>('GET', path, undefined, options),
  post: <T>(path: string, body: unknown = {}, options: RequestOptions = {}) => call<T>('POST', path, body, options),
  put: <T>(path: string, body: unknown, options: RequestOptions = {}) => call<T>('PUT', path, body, options),
  patch: <T>(path: string, body: unknown, options: RequestOptions = {}) => call<T>('PATCH', path, body, options),
  delete: <T>(path: string, options: RequestOptions = {}) => call<T>('DELETE', path, undefined, options),

  /** Sends a form with a file. */
  async upload<T>(path: string, form: FormData, { signal, idempotencyKey }: RequestOptions = {}): Promise<T> {
    const headers = { 'Idempotency-Key': idempotencyKey ?? newIdempotencyKey() }
    const response = await authorised(addressOf(path), { method: 'POST', headers, body: form, ...(signal ? { signal } : {}) })
    return (await response.json()) as T
  },

  /** Fetches a file with the session and offers it to the person under the server's name for it. */
  async download(path: string, options: RequestOptions = {}): Promise<{ name: string; blob: Blob }> {
    const response = await authorised(addressOf(path, options.query), {
      method: 'GET',
      ...(options.signal ? { signal: options.signal } : {}),
    })
    const name = /filename="([^"]+)"/.exec(response.headers.get('content-disposition') ?? '')?.[1] ?? 'download'
    return { name, blob: await response.blob() }
  },

  /** Opens an event stream; it ends when the signal aborts. */
  stream: (path: string, signal: AbortSignal, lastEventId?: string) =>
    authorised(addressOf(path), {
      method: 'GET',
      signal,
      headers: { Accept: 'text/event-stream', ...(lastEventId === undefined ? {} : { 'Last-Event-ID': lastEventId }) },
    }),
}
