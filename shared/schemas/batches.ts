import { z } from 'zod'
import { BATCH_STATES } from '../vocabulary.ts'
import { Id, Reason, UtcTime, Version } from './field.ts'

export const PlanBatch = z
  .strictObject({
    siteId: Id,
    number: z
      .string()
      .trim()
      .min(1)
      .max(30)
      .regex(/^[\w./-]+$/, 'A batch number may hold letters, digits, dot, stroke, hyphen and underscore.'),
    machineId: Id,
    productId: Id,
    toolingSetId: Id,
    shellLotId: Id,
    blendLot: z.string().trim().min(1).max(40),
    plannedCapsules: z.int().min(1).max(100_000_000),
    indexesPerMinute: z.number().positive().max(300).optional(),
  })
  .meta({ id: 'PlanBatch', description: 'A batch before it starts: what is filled, on which machine, with which tooling and shells.' })
export type PlanBatch = z.output<typeof PlanBatch>

export const StartBatch = z
  .strictObject({ version: Version })
  .meta({ id: 'StartBatch', description: 'The version of the batch that was seen.' })
export type StartBatch = z.output<typeof StartBatch>

export const ApproveStartUp = z
  .strictObject({ version: Version, password: z.string().min(1).max(1_000) })
  .meta({ id: 'ApproveStartUp', description: 'The start-up is approved by signature: the pass-phrase again.' })
export type ApproveStartUp = z.output<typeof ApproveStartUp>

export const EndBatch = z
  .strictObject({
    version: Version,
    goodCapsules: z.int().min(0).max(100_000_000),
    rejectedCapsules: z.int().min(0).max(100_000_000),
    setUpScrapCapsules: z.int().min(0).max(100_000_000),
  })
  .meta({ id: 'EndBatch', description: 'What came out of the run, in capsules.' })
export type EndBatch = z.output<typeof EndBatch>

export const SetAssay = z
  .strictObject({ version: Version, assayPercent: z.number().min(1).max(200), reason: Reason })
  .meta({ id: 'SetAssay', description: 'The assay of the blend in percent of the label claim, and where it comes from.' })
export type SetAssay = z.output<typeof SetAssay>

const Named = z.object({ id: Id, code: z.string() })

export const BatchAnswer = z
  .object({
    id: Id,
    siteId: Id,
    number: z.string(),
    state: z.enum(BATCH_STATES),
    machine: Named.extend({
      name: z.string(),
      boresPerGroup: z.int(),
      discGroups: z.int(),
      segments: z.int(),
      stations: z.int(),
      scaleMinMm: z.number(),
      scaleMaxMm: z.number(),
    }),
    product: Named.extend({
      name: z.string(),
      capsuleSize: z.string(),
      targetFillMg: z.number(),
      lowerSpecificationMg: z.number(),
      upperSpecificationMg: z.number(),
      acceptanceStandards: z.array(z.string()),
      labelClaims: z.array(z.object({ active: z.string(), claimMg: z.number() })),
    }),
    toolingSet: Named,
    shellLot: Named.extend({ tareMeanMg: z.number().nullable(), tareSdMg: z.number().nullable(), tareN: z.int() }),
    controlPlan: z.object({
      id: Id,
      planVersion: z.int(),
      basis: z.string(),
      sampleSize: z.int(),
      startUpSampleSize: z.int(),
      intervalMinutes: z.int(),
      chart: z.string(),
      runTests: z.array(z.int()),
      meanAlertPercent: z.number(),
      meanActionPercent: z.number(),
      individualAlertPercent: z.number(),
      individualActionPercent: z.number(),
      rsdAlertPercent: z.number(),
      rsdActionPercent: z.number(),
      reactionSteps: z.array(z.string()),
    }),
    blendLot: z.string(),
    plannedCapsules: z.int(),
    indexesPerMinute: z.number(),
    capsulesPerHour: z.number(),
    startedAt: UtcTime.nullable(),
    endedAt: UtcTime.nullable(),
    startUpApprovedAt: UtcTime.nullable(),
    startUpApprovedBy: z.string().nullable(),
    assayPercent: z.number().nullable(),
    goodCapsules: z.int().nullable(),
    rejectedCapsules: z.int().nullable(),
    setUpScrapCapsules: z.int().nullable(),
    sampleCount: z.int(),
    version: Version,
  })
  .meta({ id: 'Batch', description: 'A batch with everything it was made with.' })
export type BatchAnswer = z.output<typeof BatchAnswer>

export const BatchListItem = z
  .object({
    id: Id,
    siteId: Id,
    number: z.string(),
    state: z.enum(BATCH_STATES),
    machineCode: z.string(),
    productCode: z.string(),
    productName: z.string(),
    startedAt: UtcTime.nullable(),
    endedAt: UtcTime.nullable(),
    sampleCount: z.int(),
    lastVerdict: z.string().nullable(),
    openSignals: z.int(),
  })
  .meta({ id: 'BatchListItem', description: 'A batch in a list.' })
export type BatchListItem = z.output<typeof BatchListItem>

export const BatchList = z
  .object({ items: z.array(BatchListItem), total: z.int() })
  .meta({ id: 'BatchList', description: 'A page of batches, newest first, and how many there are.' })
export type BatchList = z.output<typeof BatchList>

export const BatchQuery = z
  .strictObject({
    siteId: Id.optional(),
    state: z.enum(BATCH_STATES).optional(),
    machineId: Id.optional(),
    productId: Id.optional(),
    search: z.string().max(40).optional(),
    limit: z.coerce.number().int().min(1).max(200).default(50),
    offset: z.coerce.number().int().min(0).max(1_000_000).default(0),
  })
  .meta({ id: 'BatchQuery', description: 'Which batches to list.' })
export type BatchQuery = z.output<typeof BatchQuery>

export const BatchId = z.object({ batchId: Id })
