import { z } from 'zod'
import { CHART_IDS } from '#shared/statistics/charts/index.ts'
import { RUN_TEST_NUMBERS, RUN_TESTS } from '#shared/statistics/run-tests/index.ts'
import { Probability, Seed } from './simulation.ts'

const IN_SIGMAS = { 'x-unit': 'sigmas of the plotted mean' }
const UNIT_SIGMAS = { 'x-unit': 'sigmas of one capsule' }
const MG = { 'x-unit': 'mg' }
const MINUTES = { 'x-unit': 'min' }

const TestNumber = z.literal([...RUN_TEST_NUMBERS])

const watching = {
  chart: z.enum(CHART_IDS),
  n: z.int().min(1).max(1_000).meta({ description: 'Capsules a sample.' }),
  tests: z.array(TestNumber).min(1).max(RUN_TESTS.length).optional().meta({ description: 'Run tests by number; test 1 by default.' }),
  testLengths: z
    .array(z.strictObject({ test: TestNumber, length: z.int().min(1).max(100) }))
    .max(RUN_TESTS.length)
    .optional(),
  sameSideRun: z
    .int()
    .min(2)
    .max(100)
    .optional()
    .meta({ description: 'Points in a row on one side that test 2 asks for; nine by default.' }),
  ewma: z
    .strictObject({ lambda: z.number().positive().max(1).default(0.2), width: z.number().positive().max(10).default(3).meta(IN_SIGMAS) })
    .optional(),
  cusum: z
    .strictObject({
      k: z.number().positive().max(10).default(0.5).meta(IN_SIGMAS),
      h: z.number().positive().max(50).default(5).meta(IN_SIGMAS),
      headStart: z.number().min(0).max(50).default(0).meta(IN_SIGMAS),
    })
    .optional(),
  seed: Seed,
}

export const RunLengthRequest = z
  .strictObject({
    ...watching,
    shiftSigma: z.number().min(-100).max(100).meta(UNIT_SIGMAS),
    driftSigma: z
      .number()
      .min(-100)
      .max(100)
      .optional()
      .meta({ description: 'Added at each point.', ...UNIT_SIGMAS }),
    betweenSigma: z
      .number()
      .min(0)
      .max(100)
      .optional()
      .meta({ description: 'SD between samples.', ...UNIT_SIGMAS }),
  })
  .meta({ id: 'RunLengthRequest', description: 'A chart, its tests, and the change that it is to see.' })
export type RunLengthRequest = z.output<typeof RunLengthRequest>

const runLength = {
  averageRunLength: z.number().meta({ 'x-unit': 'points' }),
  standardError: z.number().optional().meta({ description: 'Of a simulated figure.', 'x-unit': 'points' }),
  method: z.enum(['exact', 'simulated']),
}

export const RunLengthAnswer = z
  .object(runLength)
  .meta({ id: 'RunLengthAnswer', description: 'Points until the first signal, on average.' })
export type RunLengthAnswer = z.output<typeof RunLengthAnswer>

export const WatchPlan = z
  .strictObject({
    ...watching,
    intervalMinutes: z.number().positive().max(10_000).meta(MINUTES),
    capsulesPerHour: z.number().positive().max(1_000_000).meta({ 'x-unit': 'capsules/h' }),
    sigmaMg: z
      .number()
      .positive()
      .meta({ description: 'SD within samples.', ...MG }),
    betweenSigmaMg: z
      .number()
      .min(0)
      .optional()
      .meta({ description: 'SD between samples.', ...MG }),
  })
  .meta({ id: 'WatchPlan', description: 'A control plan: what is weighed, how often, and what the chart watches with.' })

export const WeightChange = z
  .strictObject({ shiftMg: z.number().optional().meta(MG), driftMgPerHour: z.number().optional().meta({ 'x-unit': 'mg/h' }) })
  .meta({ id: 'WeightChange', description: 'A change of the mean to be seen: a step, a drift, or both.' })

export const OperatingCharacteristicRequest = z
  .strictObject({ plan: WatchPlan, changes: z.array(WeightChange).min(1).max(20) })
  .meta({ id: 'OperatingCharacteristicRequest', description: 'A control plan and the changes that it is to see.' })

export const Foresight = z
  .object({
    ...runLength,
    shiftMg: z.number().meta(MG),
    driftMgPerHour: z.number().meta({ 'x-unit': 'mg/h' }),
    averageMinutes: z.number().meta({ description: 'From the change to the signal.', ...MINUTES }),
    capsulesWeighed: z.number().meta({ 'x-unit': 'capsules' }),
    capsulesMade: z.number().meta({ 'x-unit': 'capsules' }),
    seenWithin: z.array(Probability).meta({ description: 'The chance of a signal within the first 1, 2, … samples.' }),
    samplesFor95: z.int().nullable(),
  })
  .meta({ id: 'Foresight', description: 'How long a change goes on before the chart signals.' })

const characteristic = {
  unchanged: z.object({
    ...runLength,
    averageMinutes: z.number().meta({ description: 'Between false alarms.', ...MINUTES }),
    falseAlarmsPer100Samples: z.number(),
  }),
  changes: z.array(Foresight),
}

export const OperatingCharacteristicAnswer = z
  .object(characteristic)
  .meta({ id: 'OperatingCharacteristicAnswer', description: 'What a control plan would see, and when.' })

export const WhatIfRequest = z
  .strictObject({
    plan: WatchPlan,
    change: WeightChange,
    options: z
      .array(z.strictObject({ n: z.int().min(1).max(1_000), intervalMinutes: z.number().positive().max(10_000).meta(MINUTES) }))
      .min(1)
      .max(20),
  })
  .meta({ id: 'WhatIfRequest', description: 'A control plan at other sample sizes and intervals, for one change.' })

export const WhatIfAnswer = z
  .array(
    z.object({
      n: z.int(),
      intervalMinutes: z.number().meta(MINUTES),
      weighedPerHour: z.number().meta({ 'x-unit': 'capsules/h' }),
      ...characteristic,
    }),
  )
  .meta({ id: 'WhatIfAnswer', description: 'Each option with what it would see, and what it costs.' })
