import { z } from 'zod'
import { SAMPLE_KINDS, SAMPLE_STATES, VERDICTS, WEIGHING_BASES, WEIGHING_ENTRIES } from '../vocabulary.ts'
import { Id, Reason, StatedTime, UtcTime, Version, WeightMg } from './field.ts'

export const SampleId = z.object({ sampleId: Id })
export const WeighingPlace = z.object({ sampleId: Id, ordinal: z.coerce.number().int().min(1).max(1_000) })

export const OpenSample = z
  .strictObject({
    kind: z.enum(SAMPLE_KINDS),
    balanceId: Id,
    plannedN: z.int().min(1).max(1_000).optional(),
    firstSegment: z.int().min(1).max(48).nullable().default(null),
    dueAt: StatedTime.nullable().default(null),
    entry: z.enum(['typed', 'balance']).default('typed'),
  })
  .meta({ id: 'OpenSample', description: 'A sample begins: its kind, its size (the plan’s by default) and the balance.' })
export type OpenSample = z.output<typeof OpenSample>

const Reading = {
  grossMg: WeightMg.optional(),
  shellMg: WeightMg.optional(),
  netMg: WeightMg.optional(),
  shownDecimals: z.int().min(0).max(3),
  position: z.int().min(1).max(60).optional(),
  segment: z.int().min(1).max(48).optional(),
}

export const PutWeighing = z
  .strictObject({
    ...Reading,
    isConfirmed: z.boolean().default(false),
    entry: z.enum(['typed', 'balance']).default('typed'),
    deviceTime: StatedTime.nullable().default(null),
  })
  .meta({ id: 'PutWeighing', description: 'One capsule as the balance showed it. A doubtful weight is kept only when confirmed.' })
export type PutWeighing = z.output<typeof PutWeighing>

export const CorrectWeighing = z
  .strictObject({ ...Reading, reason: Reason })
  .meta({ id: 'CorrectWeighing', description: 'A later version of one weight, with its reason; the first stays readable.' })
export type CorrectWeighing = z.output<typeof CorrectWeighing>

export const AbandonSample = z.strictObject({ reason: Reason }).meta({ id: 'AbandonSample', description: 'Why a sample is not finished.' })
export type AbandonSample = z.output<typeof AbandonSample>

export const VerdictReason = z
  .object({ test: z.string(), name: z.string(), severity: z.enum(['alert', 'action']), sentence: z.string() })
  .meta({ id: 'VerdictReason', description: 'A limit or a run test that a sample hit, in one sentence.' })
export type VerdictReason = z.output<typeof VerdictReason>

export const WeighingAnswer = z
  .object({
    ordinal: z.int(),
    position: z.int().nullable(),
    segment: z.int().nullable(),
    grossMg: z.number().nullable(),
    shellMg: z.number().nullable(),
    netMg: z.number().nullable(),
    shownDecimals: z.int(),
    isQuestioned: z.boolean(),
    entry: z.enum(WEIGHING_ENTRIES),
    weighedAt: UtcTime,
    version: z.int(),
    corrections: z.array(
      z.object({
        version: z.int(),
        grossMg: z.number().nullable(),
        netMg: z.number().nullable(),
        reason: z.string(),
        correctedBy: z.string(),
        correctedAt: UtcTime,
      }),
    ),
  })
  .meta({ id: 'Weighing', description: 'One capsule as it stands now, with its corrections.' })
export type WeighingAnswer = z.output<typeof WeighingAnswer>

const Summary = {
  n: z.int(),
  meanMg: z.number().nullable(),
  sdMg: z.number().nullable(),
  rangeMg: z.number().nullable(),
  minMg: z.number().nullable(),
  maxMg: z.number().nullable(),
}

export const WeighingKept = z
  .object({ weighing: WeighingAnswer, ...Summary, verdict: z.enum(VERDICTS), reasons: z.array(VerdictReason) })
  .meta({ id: 'WeighingKept', description: 'The weight as it was stored, and the sample so far.' })
export type WeighingKept = z.output<typeof WeighingKept>

export const SampleListItem = z
  .object({
    id: Id,
    batchId: Id,
    sequence: z.int(),
    kind: z.enum(SAMPLE_KINDS),
    basis: z.enum(WEIGHING_BASES),
    state: z.enum(SAMPLE_STATES),
    plannedN: z.int(),
    ...Summary,
    dueAt: UtcTime.nullable(),
    startedAt: UtcTime,
    completedAt: UtcTime.nullable(),
    capsulesMade: z.int().nullable(),
    entry: z.enum(WEIGHING_ENTRIES),
    verdict: z.enum(VERDICTS).nullable(),
    isLate: z.boolean(),
    correctionCount: z.int(),
    abandonedReason: z.string().nullable(),
    excludedReason: z.string().nullable(),
    version: Version,
  })
  .meta({ id: 'SampleListItem', description: 'A sample with its summary.' })
export type SampleListItem = z.output<typeof SampleListItem>

export const SampleAnswer = SampleListItem.extend({
  tareMeanMg: z.number().nullable(),
  tareSdMg: z.number().nullable(),
  firstSegment: z.int().nullable(),
  balanceId: Id.nullable(),
  readabilityMg: z.number().nullable(),
  weighedBy: z.string(),
  verdictReasons: z.array(VerdictReason),
  weighings: z.array(WeighingAnswer),
}).meta({ id: 'Sample', description: 'A sample with every capsule.' })
export type SampleAnswer = z.output<typeof SampleAnswer>

export const SampleQuery = z
  .strictObject({ state: z.enum(SAMPLE_STATES).optional() })
  .meta({ id: 'SampleQuery', description: 'Which samples to list.' })
export type SampleQuery = z.output<typeof SampleQuery>

export const DueSample = z
  .object({
    batchId: Id,
    batchNumber: z.string(),
    machineCode: z.string(),
    productCode: z.string(),
    productName: z.string(),
    basis: z.enum(WEIGHING_BASES),
    kind: z.enum(SAMPLE_KINDS),
    n: z.int(),
    dueAt: UtcTime,
    because: z.string(),
    isOverdue: z.boolean(),
    lastVerdict: z.enum(VERDICTS).nullable(),
    lastSampleAt: UtcTime.nullable(),
    incomplete: z.object({ id: Id, n: z.int(), plannedN: z.int() }).nullable(),
    openSignals: z.int(),
  })
  .meta({ id: 'DueSample', description: 'What a running machine needs weighed next.' })
export type DueSample = z.output<typeof DueSample>
