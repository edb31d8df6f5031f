import { z } from 'zod'
import { PASS_LOTS } from '#shared/statistics/pass-probability.ts'
import { Probability, Seed } from './simulation.ts'

const PERCENT = { 'x-unit': '% of claim' }
const MG = { 'x-unit': 'mg' }

const size = {
  seed: Seed,
  lots: z.int().min(100).max(PASS_LOTS.max).optional().meta({ description: 'Simulated tests.' }),
}
const Target = z.number().positive().optional().meta(PERCENT)
const contents = { mean: z.number().positive().meta(PERCENT), sd: z.number().min(0).meta(PERCENT) }
const weights = { mean: z.number().positive().meta(MG), sd: z.number().min(0).meta(MG) }

const OfBatch = z.discriminatedUnion('standard', [
  z.strictObject({ standard: z.literal('usp-905'), ...contents, target: Target, ...size }),
  z.strictObject({
    standard: z.literal('usp-905-weight'),
    ...weights,
    assayPercent: z.number().positive().meta(PERCENT),
    target: Target,
    ...size,
  }),
  z.strictObject({ standard: z.literal('usp-2091'), ...weights, shell: z.strictObject(weights), ...size }),
  z.strictObject({ standard: z.literal('ph-eur-2.9.5'), ...weights, ...size }),
])

const FromSample = z.strictObject({
  values: z
    .array(z.number())
    .min(2)
    .max(100_000)
    .meta({ description: 'Contents found in a sample of the batch.', ...PERCENT }),
  confidence: z.number().gt(0).lt(1),
  standard: z.literal('usp-905').optional(),
  target: Target,
  ...size,
})

export const PassProbabilityRequest = z.union([FromSample, OfBatch]).meta({
  id: 'PassProbabilityRequest',
  description: 'A batch with known mean and SD, or a sample of it and the confidence with which a lower bound is wanted.',
})
export type PassProbabilityRequest = z.output<typeof PassProbabilityRequest>

export const PassProbabilityAnswer = z
  .object({
    probability: Probability.meta({ description: 'The chance of passing; from a sample, its lower bound at the stated confidence.' }),
    standardError: z.number().min(0).meta({ description: 'Of the simulation.' }),
    lots: z.int(),
    n: z.int().optional(),
    mean: z.number().optional().meta(PERCENT),
    sd: z.number().optional().meta(PERCENT),
    confidence: z.number().optional(),
    sigmaUpper: z
      .number()
      .optional()
      .meta({ description: 'Largest SD of the confidence region.', ...PERCENT }),
    meanInterval: z
      .tuple([z.number(), z.number()])
      .optional()
      .meta({ description: 'Means of the region at that SD.', ...PERCENT }),
    leastFavourableMean: z.number().optional().meta(PERCENT),
    floor: Probability.optional().meta({ description: 'The same bound without simulation, somewhat smaller.' }),
  })
  .meta({ id: 'PassProbabilityAnswer', description: 'How likely the batch is to pass.' })
export type PassProbabilityAnswer = z.output<typeof PassProbabilityAnswer>
