import { z } from 'zod'
import { endpoint, type Endpoint } from '../http/endpoint.ts'
import { describeApi } from '../http/openapi.ts'

/** The machine-readable description of every endpoint but itself. */
export function apiDescriptionEndpoints(endpoints: readonly Endpoint[], version: string): Endpoint[] {
  const description = describeApi(endpoints, version)
  return [
    endpoint({
      method: 'get',
      path: '/openapi.json',
      summary: 'OpenAPI 3.1 description of this API',
      allow: 'signed-in',
      answer: { status: 200, schema: z.record(z.string(), z.unknown()) },
      handle: () => description,
    }),
  ]
}
