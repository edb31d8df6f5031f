import { z } from 'zod'
import { DEVIATION_STATES, DISPOSITION_DECISIONS } from '../vocabulary.ts'
import { Id, UtcTime, Version } from './field.ts'

export const CheckItem = z
  .object({ name: z.string(), state: z.enum(['done', 'missing', 'exception']), sentence: z.string(), blocks: z.boolean() })
  .meta({ id: 'CheckItem', description: 'One thing the quality unit looks at before release; what blocks must be settled first.' })
export type CheckItem = z.output<typeof CheckItem>

export const AcceptanceResult = z
  .object({
    standard: z.string(),
    edition: z.string(),
    verdict: z.string(),
    basis: z.string(),
    n: z.int(),
    headline: z.string(),
    arithmetic: z.array(z.string()),
    reasons: z.array(z.string()),
  })
  .meta({ id: 'AcceptanceResult', description: 'One acceptance standard worked through with the weights of the batch, line by line.' })
export type AcceptanceResult = z.output<typeof AcceptanceResult>

export const DeviationAnswer = z
  .object({
    id: Id,
    batchId: Id,
    number: z.string(),
    title: z.string(),
    description: z.string(),
    cause: z.string().nullable(),
    effectOnQuality: z.string().nullable(),
    correction: z.string().nullable(),
    materialOutcome: z.string().nullable(),
    state: z.enum(DEVIATION_STATES),
    openedBy: z.string(),
    openedAt: UtcTime,
    closedBy: z.string().nullable(),
    closedAt: UtcTime.nullable(),
    version: Version,
  })
  .meta({ id: 'Deviation', description: 'A departure from procedure and its investigation.' })
export type DeviationAnswer = z.output<typeof DeviationAnswer>

export const DispositionAnswer = z
  .object({
    id: Id,
    sequence: z.int(),
    decision: z.enum(DISPOSITION_DECISIONS),
    reason: z.string(),
    decidedBy: z.string(),
    decidedAt: UtcTime,
    meaning: z.string(),
    contentHash: z.string(),
  })
  .meta({ id: 'Disposition', description: 'A signed decision of the quality unit.' })
export type DispositionAnswer = z.output<typeof DispositionAnswer>

export const ReleaseReview = z
  .object({
    checklist: z.array(CheckItem),
    acceptance: z.array(AcceptanceResult),
    deviations: z.array(DeviationAnswer),
    dispositions: z.array(DispositionAnswer),
    contentHash: z.string(),
    mayRelease: z.boolean(),
  })
  .meta({ id: 'ReleaseReview', description: 'What the quality unit sees before it decides.' })
export type ReleaseReview = z.output<typeof ReleaseReview>

export const DecideBatch = z
  .strictObject({
    version: Version,
    decision: z.enum(DISPOSITION_DECISIONS),
    reason: z.string().trim().min(3, 'Give the reason in words.').max(2_000),
    password: z.string().min(1).max(1_000),
    /** The hash of what was shown: a record that changed meanwhile cannot be signed unseen. */
    contentHash: z.string().length(64),
  })
  .meta({ id: 'DecideBatch', description: 'Release, hold or reject, by signature.' })
export type DecideBatch = z.output<typeof DecideBatch>

export const OpenDeviation = z
  .strictObject({ title: z.string().trim().min(3).max(200), description: z.string().trim().min(3).max(4_000) })
  .meta({ id: 'OpenDeviation', description: 'What departed from procedure, exactly.' })
export type OpenDeviation = z.output<typeof OpenDeviation>

const Finding = z.string().trim().min(3).max(2_000)
export const CloseDeviation = z
  .strictObject({ version: Version, cause: Finding, effectOnQuality: Finding, correction: Finding, materialOutcome: Finding })
  .meta({ id: 'CloseDeviation', description: 'Cause, effect on quality, correction, and what became of the material.' })
export type CloseDeviation = z.output<typeof CloseDeviation>
