import { UniformityAnswer, UniformityRequest } from '#shared/schemas/calculations/uniformity.ts'
import { judgeUniformity } from '#shared/trade/standards/index.ts'
import { endpoint } from '../../http/endpoint.ts'

const postUniformity = endpoint({
  method: 'post',
  path: '/calculations/uniformity',
  summary: 'Judge contents or weights by a pharmacopoeial standard',
  allow: 'signed-in',
  body: UniformityRequest,
  answer: { status: 200, schema: UniformityAnswer },
  handle: ({ body }) => judgeUniformity(body),
})

export const uniformityEndpoints = [postUniformity]
