import { z } from 'zod'
import type { Config } from '../config.ts'
import { apiPage } from '../http/api-page.ts'
import { endpoint, openEndpoint, type Endpoint } from '../http/endpoint.ts'
import { FileAnswer } from '../http/file-answer.ts'
import { describeApi } from '../http/openapi.ts'

const AnyJson = z.record(z.string(), z.unknown())

/** The API for programs and for people, made from the endpoints themselves. In production both ask for a session. */
export function apiDescriptionEndpoints(endpoints: readonly Endpoint[], { environment }: Config, version: string): Endpoint[] {
  const description = describeApi(endpoints, version)
  const page = new FileAnswer({
    name: 'api.html',
    mediaType: 'text/html',
    content: Buffer.from(apiPage(endpoints, version)),
    isInline: true,
  })
  const json = {
    method: 'get',
    path: '/openapi.json',
    summary: 'OpenAPI 3.1 description of this API',
    answer: { status: 200, schema: AnyJson },
    handle: () => description,
  } as const
  const docs = {
    method: 'get',
    path: '/docs',
    summary: 'This API as a page',
    answer: { status: 200, file: 'text/html' },
    handle: () => page,
  } as const
  if (environment !== 'production') return [openEndpoint(json), openEndpoint(docs)]
  return [endpoint({ ...json, allow: 'signed-in' }), endpoint({ ...docs, allow: 'signed-in' })]
}
