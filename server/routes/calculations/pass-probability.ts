import { PassProbabilityAnswer, PassProbabilityRequest } from '#shared/schemas/calculations/pass-probability.ts'
import { summarise } from '#shared/statistics/summary.ts'
import { endpoint } from '../../http/endpoint.ts'
import { simulationPool } from '../../workers/simulation-pool.ts'

async function answer(body: PassProbabilityRequest, signal: AbortSignal): Promise<PassProbabilityAnswer> {
  if (!('values' in body)) return simulationPool().run({ kind: 'chance-of-passing', request: body }, signal)
  const { values, confidence, target, seed, lots } = body
  const { n, mean, sd } = summarise(values)
  const sample = { n, mean, sd, confidence, target }
  return { n, mean, sd, confidence, ...(await simulationPool().run({ kind: 'pass-bound', sample, size: { seed, lots } }, signal)) }
}

const postPassProbability = endpoint({
  method: 'post',
  path: '/calculations/pass-probability',
  summary: 'How likely a batch is to pass a standard, or a lower bound on it from a sample',
  allow: 'signed-in',
  body: PassProbabilityRequest,
  answer: { status: 200, schema: PassProbabilityAnswer },
  problems: [503],
  handle: ({ body, signal }) => answer(body, signal),
})

export const passProbabilityEndpoints = [postPassProbability]
