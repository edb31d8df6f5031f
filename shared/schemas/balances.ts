import { z } from 'zod'
import { BALANCE_CHECK_KINDS, BALANCE_STATES } from '../vocabulary.ts'
import { Id, StatedTime, UtcTime, Version } from './field.ts'
import { changeFields, code, figure, remarks, words } from './master-fields.ts'

const balanceFields = {
  code: code(20),
  description: words(200),
  readabilityMg: figure({ min: 0.0001, max: 1_000, decimals: 4, unit: 'mg' }),
  repeatabilitySdMg: figure({ min: 0, max: 1_000, decimals: 4, unit: 'mg' }),
  capacityMg: figure({ min: 1, max: 100_000_000, decimals: 3, unit: 'mg' }),
  safetyFactor: figure({ min: 1, max: 100, decimals: 2, unit: '×' }),
  calibrationDueOn: z.iso.date('A date is expected, such as 2026-03-31.'),
}

interface Figures {
  readabilityMg: number
  capacityMg: number
}

const isWithinCapacity = ({ readabilityMg, capacityMg }: Figures): boolean => readabilityMg < capacityMg
const capacityMessage = { path: ['capacityMg'], message: 'The capacity must be larger than the readability.' }

export const CreateBalance = z
  .strictObject({ siteId: Id, ...balanceFields })
  .refine(isWithinCapacity, capacityMessage)
  .meta({ id: 'CreateBalance', description: 'A balance: what it resolves, repeats and carries, and when its calibration ends.' })
export type CreateBalance = z.output<typeof CreateBalance>

export const UpdateBalance = z
  .strictObject({ ...balanceFields, state: z.enum(BALANCE_STATES), ...changeFields })
  .refine(isWithinCapacity, capacityMessage)
  .meta({ id: 'UpdateBalance', description: 'A balance as it shall be, in use or out of use, the version that was seen, and why.' })
export type UpdateBalance = z.output<typeof UpdateBalance>

const checkMg = figure({ min: 0.0001, max: 100_000_000, decimals: 4, unit: 'mg' })

const checkFields = {
  checkedAt: StatedTime.optional(),
  referenceWeight: words(60).describe('The external weight by its mark; the balance’s own adjustment is no check.'),
  nominalMg: checkMg,
  toleranceMg: checkMg,
  remarks: remarks(500),
}

export const RecordBalanceCheck = z
  .discriminatedUnion('kind', [
    z.strictObject({
      kind: z.enum(['daily', 'calibration']),
      ...checkFields,
      readingMg: figure({ min: 0, max: 100_000_000, decimals: 4, unit: 'mg' }),
    }),
    z.strictObject({
      kind: z.literal('repeatability'),
      ...checkFields,
      readingsMg: z.array(checkMg).min(10, 'Repeatability needs at least 10 weighings of one weight.').max(100),
    }),
  ])
  .meta({
    id: 'RecordBalanceCheck',
    description:
      'A check against an external weight; repeatability is the SD of ten weighings or more, its tolerance the largest SD allowed.',
  })
export type RecordBalanceCheck = z.output<typeof RecordBalanceCheck>

export const BalanceCheckAnswer = z
  .object({
    id: Id,
    kind: z.enum(BALANCE_CHECK_KINDS),
    checkedAt: UtcTime,
    checkedBy: z.string(),
    referenceWeight: z.string(),
    nominalMg: z.number(),
    /** What the balance showed; for repeatability the SD of the weighings. */
    readingMg: z.number(),
    toleranceMg: z.number(),
    hasPassed: z.boolean(),
    remarks: z.string(),
  })
  .meta({ id: 'BalanceCheck', description: 'One external check of a balance.' })
export type BalanceCheckAnswer = z.output<typeof BalanceCheckAnswer>

export const BalanceAnswer = z
  .object({
    id: Id,
    siteId: Id,
    ...balanceFields,
    code: z.string(),
    description: z.string(),
    calibrationDueOn: z.string(),
    state: z.enum(BALANCE_STATES),
    /** Calibration day has passed in the site's zone. */
    isCalibrationOverdue: z.boolean(),
    /** Smallest net weight that one weighing may serve, and one that two weighings (full, then its shell) may serve. */
    minimumWeightMg: z.number(),
    minimumNetMg: z.number(),
    lastCheck: BalanceCheckAnswer.nullable(),
    version: Version,
  })
  .meta({ id: 'Balance', description: 'A balance, its state and the smallest weight it may weigh.' })
export type BalanceAnswer = z.output<typeof BalanceAnswer>

export const BalanceDetail = BalanceAnswer.extend({
  checks: z.array(BalanceCheckAnswer),
  products: z.array(
    z.object({ id: Id, code: z.string(), targetFillMg: z.number(), isBelowMinimum: z.boolean(), isNetBelowMinimum: z.boolean() }),
  ),
  /** After a failed check: every sample weighed on it since the last good one. */
  samplesInDoubt: z.array(z.object({ sampleId: Id, batchId: Id, batchNumber: z.string(), sequence: z.int(), startedAt: UtcTime })),
}).meta({
  id: 'BalanceDetail',
  description: 'A balance with its checks, newest first, the products it may weigh, and samples in doubt after a failed check.',
})
export type BalanceDetail = z.output<typeof BalanceDetail>

export const BalanceId = z.object({ balanceId: Id })
