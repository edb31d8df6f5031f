import { z } from 'zod'
import { WEIGHING_BASES } from '#shared/vocabulary.ts'

const PERCENT = { 'x-unit': '% of claim' }
const MG = { 'x-unit': 'mg' }

const Contents = z
  .array(z.number())
  .min(1)
  .max(100)
  .meta({ description: 'Content of each unit; 10, or 30 with the second stage.', ...PERCENT })
const Weights = (description: string) =>
  z
    .array(z.number().positive())
    .min(1)
    .max(100)
    .meta({ description, ...MG })
const Target = z
  .number()
  .positive()
  .optional()
  .meta({ description: 'T, the mean of the potency limits; 100 by default.', ...PERCENT })
const ClaimMg = z
  .number()
  .positive()
  .optional()
  .meta({ description: 'What one unit is said to contain; needed to tell whether weight may stand for content.', ...MG })
const AssayPercent = z
  .number()
  .positive()
  .meta({ description: 'Assay of the batch.', ...PERCENT })
const Active = z.string().trim().min(1).max(120)
const Basis = z
  .enum(WEIGHING_BASES)
  .optional()
  .meta({ description: 'How the weights were come by; each unit against its own shell by default.' })

const EITHER = 'Give one active at the top, or several under actives, not both.'

const ByContent = z
  .strictObject({
    standard: z.literal('usp-905'),
    contents: Contents.optional(),
    target: Target,
    actives: z
      .array(z.strictObject({ active: Active, contents: Contents, target: Target }))
      .min(1)
      .max(20)
      .optional(),
  })
  .refine(({ contents, actives }) => (contents === undefined) !== (actives === undefined), { error: EITHER, path: ['contents'] })

const ByWeight = z
  .strictObject({
    standard: z.literal('usp-905-weight'),
    weights: Weights('Net weight of each unit; 10, or 30 with the second stage.'),
    assayPercent: AssayPercent.optional(),
    target: Target,
    claimMg: ClaimMg,
    actives: z
      .array(z.strictObject({ active: Active, assayPercent: AssayPercent, target: Target, claimMg: ClaimMg }))
      .min(1)
      .max(20)
      .optional(),
    weighingBasis: Basis,
  })
  .refine(({ assayPercent, actives }) => (assayPercent === undefined) !== (actives === undefined), {
    error: EITHER,
    path: ['assayPercent'],
  })

const HardCapsules = z.strictObject({
  standard: z.literal('usp-2091'),
  gross: Weights('Each intact capsule; 20, or 60 with the second sample.'),
  shells: Weights('The emptied shell of each capsule, in the same order.').optional(),
  weighingBasis: Basis,
})

const UniformMass = z.strictObject({
  standard: z.literal('ph-eur-2.9.5'),
  net: Weights('Contents of each of 20 capsules.'),
  weighingBasis: Basis,
})

export const UniformityRequest = z
  .discriminatedUnion('standard', [ByContent, ByWeight, HardCapsules, UniformMass])
  .meta({ id: 'UniformityRequest', description: 'Contents or weights, and the standard to judge them by.' })
export type UniformityRequest = z.output<typeof UniformityRequest>

const Lines = z.array(z.string())
const limits = (unit: { 'x-unit': string }) => z.object({ lower: z.number().meta(unit), upper: z.number().meta(unit) })
const Places = z.array(z.int()).meta({ description: 'Places counted from 0.' })
const AcceptanceBasis = z
  .enum(['compendial', 'indicative'])
  .meta({ description: 'Whether the weights allow a compendial claim; no verdict is a regulatory approval.' })

const figures = {
  stage: z.int(),
  n: z.int(),
  mean: z.number().meta(PERCENT),
  sd: z.number().meta(PERCENT),
  k: z.number(),
  target: z.number().meta(PERCENT),
  referenceValue: z.number().meta({ description: 'M.', ...PERCENT }),
  acceptanceValue: z.number().meta({ description: 'Unrounded.', ...PERCENT }),
  roundedAcceptanceValue: z.number().meta({ description: 'To one decimal, as compared with the limit.', ...PERCENT }),
  limit: z.number().meta(PERCENT),
  individualLimits: limits(PERCENT).meta({ description: '0.75·M and 1.25·M; they bind at the second stage.' }),
  outside: Places,
  verdict: z.enum(['pass', 'fail', 'test-20-more']),
  reasons: Lines,
  arithmetic: Lines,
}
const explained = { edition: z.string(), basis: AcceptanceBasis }
const weightFigures = {
  ...figures,
  contents: z.array(z.number()).meta(PERCENT),
  eligibility: z
    .object({
      isEligible: z.boolean(),
      claimMg: z.number().meta(MG),
      sharePercent: z.number().meta({ 'x-unit': '%' }),
      sentence: z.string(),
    })
    .optional(),
}
const massFigures = {
  stage: z.int(),
  n: z.int(),
  average: z.number().meta(MG),
  limits: limits(MG).meta({ description: 'The inner limits; `outside` counts against these.' }),
  outside: Places,
  outerLimits: limits(MG),
  beyondOuter: Places,
  reasons: Lines,
  arithmetic: Lines,
}

export const UniformityAnswer = z
  .discriminatedUnion('standard', [
    z.object({
      standard: z.literal('usp-905'),
      ...figures,
      ...explained,
      actives: z.array(z.object({ active: z.string(), ...figures })).optional(),
    }),
    z.object({
      standard: z.literal('usp-905-weight'),
      ...weightFigures,
      ...explained,
      actives: z.array(z.object({ active: z.string(), ...weightFigures })).optional(),
    }),
    z.object({
      standard: z.literal('usp-2091'),
      ...massFigures,
      ...explained,
      verdict: z.enum(['pass', 'fail', 'weigh-shells', 'test-40-more']),
    }),
    z.object({
      standard: z.literal('ph-eur-2.9.5'),
      ...massFigures,
      ...explained,
      deviationPercent: z.number().meta({ 'x-unit': '%' }),
      verdict: z.enum(['pass', 'fail']),
    }),
  ])
  .meta({ id: 'UniformityAnswer', description: 'The verdict, its figures, and the arithmetic line by line.' })
export type UniformityAnswer = z.output<typeof UniformityAnswer>
