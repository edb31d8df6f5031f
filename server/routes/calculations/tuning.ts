import { TuningAnswer, TuningRequest } from '#shared/schemas/calculations/tuning.ts'
import { endpoint } from '../../http/endpoint.ts'
import { simulationPool } from '../../workers/simulation-pool.ts'

const postTuning = endpoint({
  method: 'post',
  path: '/calculations/tuning',
  summary: 'Learn the weight response of the settings and advise one move of one lever',
  allow: 'signed-in',
  body: TuningRequest,
  answer: { status: 200, schema: TuningAnswer },
  problems: [503],
  // Hundreds of trials of many settings take a third of a second, too long to hold up a weight.
  handle: ({ body, signal }) => simulationPool().run({ kind: 'tuning', request: body }, signal),
})

export const tuningEndpoints = [postTuning]
