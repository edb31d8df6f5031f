import { TuningAnswer, TuningRequest } from '#shared/schemas/calculations/tuning.ts'
import { adviseTuning } from '#shared/trade/tuning-advice.ts'
import { endpoint } from '../../http/endpoint.ts'

const postTuning = endpoint({
  method: 'post',
  path: '/calculations/tuning',
  summary: 'Learn the weight response of the settings and advise one move of one lever',
  allow: 'signed-in',
  body: TuningRequest,
  answer: { status: 200, schema: TuningAnswer },
  handle: ({ body }) => adviseTuning(body),
})

export const tuningEndpoints = [postTuning]
