import { SummaryAnswer, SummaryRequest } from '#shared/schemas/calculations/summary.ts'
import { summarise } from '#shared/statistics/summary.ts'
import { endpoint } from '../../http/endpoint.ts'

const postSummary = endpoint({
  method: 'post',
  path: '/calculations/summary',
  summary: 'Summarise values: mean, standard deviation, range, median',
  allow: 'signed-in',
  body: SummaryRequest,
  answer: { status: 200, schema: SummaryAnswer },
  handle: ({ body }) => summarise(body.values),
})

export const summaryEndpoints = [postSummary]
