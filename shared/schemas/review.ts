import { z } from 'zod'
import { BATCH_STATES, REVIEW_ACTION_STATES } from '../vocabulary.ts'
import { Id, UtcTime, Version } from './field.ts'

/** A week by ISO 8601, such as 2026-W09. */
export const Week = z.string().regex(/^\d{4}-W(0[1-9]|[1-4]\d|5[0-3])$/, 'A week is written like 2026-W09.')

export const ReviewQuery = z.strictObject({ siteId: Id }).meta({ id: 'ReviewQuery', description: 'Whose week.' })
export type ReviewQuery = z.output<typeof ReviewQuery>

export const ReviewFigures = z
  .object({
    week: Week,
    fromUtc: UtcTime,
    toUtc: UtcTime,
    batches: z.array(
      z.object({
        id: Id,
        number: z.string(),
        state: z.enum(BATCH_STATES),
        machineCode: z.string(),
        productCode: z.string(),
        toolingSetCode: z.string(),
        startedAt: UtcTime,
        samples: z.int(),
        targetMg: z.number(),
        meanMg: z.number().nullable(),
        meanOffPercent: z.number().nullable(),
        rsdPercent: z.number().nullable(),
        ppk: z.number().nullable(),
        alerts: z.int(),
        actions: z.int(),
        adjustments: z.int(),
      }),
    ),
    signals: z.object({
      alerts: z.int(),
      actions: z.int(),
      open: z.int(),
      causes: z.array(z.object({ cause: z.string(), count: z.int() })),
    }),
    changeovers: z.array(
      z.object({
        id: Id,
        machineCode: z.string(),
        from: z.string(),
        to: z.string(),
        startedAt: UtcTime,
        minutes: z.number().nullable(),
        plannedMinutes: z.int().nullable(),
        trials: z.int().nullable(),
        scrappedCapsules: z.int().nullable(),
      }),
    ),
    decisions: z.object({ released: z.int(), onHold: z.int(), rejected: z.int(), openDeviations: z.int() }),
  })
  .meta({ id: 'ReviewFigures', description: 'One week in figures.' })
export type ReviewFigures = z.output<typeof ReviewFigures>

export const ReviewActionAnswer = z
  .object({
    id: Id,
    week: z.string(),
    title: z.string(),
    owner: z.string(),
    dueOn: z.string(),
    state: z.enum(REVIEW_ACTION_STATES),
    effect: z.string().nullable(),
    version: Version,
  })
  .meta({ id: 'ReviewAction', description: 'What the meeting decided, who does it by when, and whether it helped.' })
export type ReviewActionAnswer = z.output<typeof ReviewActionAnswer>

export const ReviewAnswer = z
  .object({ figures: ReviewFigures, frozenAt: UtcTime.nullable(), frozenBy: z.string().nullable(), actions: z.array(ReviewActionAnswer) })
  .meta({ id: 'Review', description: 'The week as the meeting sees it; frozen figures no longer move.' })
export type ReviewAnswer = z.output<typeof ReviewAnswer>

export const FreezeReview = z
  .strictObject({ siteId: Id })
  .meta({ id: 'FreezeReview', description: 'Keep the figures of the week as they are.' })
export type FreezeReview = z.output<typeof FreezeReview>

export const AddReviewAction = z
  .strictObject({ siteId: Id, title: z.string().trim().min(3).max(300), owner: z.string().trim().min(2).max(120), dueOn: z.iso.date() })
  .meta({ id: 'AddReviewAction', description: 'An action with its owner and date.' })
export type AddReviewAction = z.output<typeof AddReviewAction>

export const CloseReviewAction = z
  .strictObject({ version: Version, state: z.enum(['done', 'dropped']), effect: z.string().trim().min(3, 'Say what it did.').max(1_000) })
  .meta({ id: 'CloseReviewAction', description: 'What became of an action and whether it helped.' })
export type CloseReviewAction = z.output<typeof CloseReviewAction>
