import {
  OperatingCharacteristicAnswer,
  OperatingCharacteristicRequest,
  RunLengthAnswer,
  RunLengthRequest,
  WhatIfAnswer,
  WhatIfRequest,
} from '#shared/schemas/calculations/run-length.ts'
import { endpoint } from '../../http/endpoint.ts'
import { simulationPool } from '../../workers/simulation-pool.ts'

const postRunLength = endpoint({
  method: 'post',
  path: '/calculations/run-length',
  summary: 'How many points a chart takes, on average, to see a change',
  allow: 'signed-in',
  body: RunLengthRequest,
  answer: { status: 200, schema: RunLengthAnswer },
  problems: [503],
  handle: ({ body, signal }) => simulationPool().run({ kind: 'run-length', request: body }, signal),
})

const postOperatingCharacteristic = endpoint({
  method: 'post',
  path: '/calculations/operating-characteristic',
  summary: 'What a control plan would see, when, and how many capsules later',
  allow: 'signed-in',
  body: OperatingCharacteristicRequest,
  answer: { status: 200, schema: OperatingCharacteristicAnswer },
  problems: [503],
  handle: ({ body: { plan, changes }, signal }) => simulationPool().run({ kind: 'operating-characteristic', plan, changes }, signal),
})

const postWhatIf = endpoint({
  method: 'post',
  path: '/calculations/what-if',
  summary: 'Compare a control plan at other sample sizes and intervals',
  allow: 'signed-in',
  body: WhatIfRequest,
  answer: { status: 200, schema: WhatIfAnswer },
  problems: [503],
  handle: ({ body: { plan, change, options }, signal }) => simulationPool().run({ kind: 'compare-plans', plan, change, options }, signal),
})

export const runLengthEndpoints = [postRunLength, postOperatingCharacteristic, postWhatIf]
