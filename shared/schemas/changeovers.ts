import { z } from 'zod'
import { CHANGEOVER_STATES } from '../vocabulary.ts'
import { Id, StatedTime, UtcTime, Version } from './field.ts'

export const ChangeoverReading = z
  .strictObject({
    name: z.string().trim().min(1).max(120),
    place: z.string().trim().max(60).default(''),
    value: z.number().min(-100_000).max(100_000),
    unit: z.string().trim().min(1).max(20),
    lowerLimit: z.number().nullable().default(null),
    upperLimit: z.number().nullable().default(null),
    manualReference: z.string().trim().max(120).default(''),
  })
  .refine(({ lowerLimit, upperLimit }) => lowerLimit === null || upperLimit === null || lowerLimit <= upperLimit, {
    path: ['lowerLimit'],
    message: 'The lower limit lies above the upper one.',
  })
  .meta({ id: 'ChangeoverReading', description: 'A figure read at the machine; its limits come from the machine’s manual.' })
export type ChangeoverReading = z.output<typeof ChangeoverReading>

export const StartChangeover = z
  .strictObject({
    machineId: Id,
    batchId: Id.nullable().default(null),
    fromToolingSetId: Id.nullable().default(null),
    toToolingSetId: Id,
    plannedMinutes: z.int().min(1).max(10_000).nullable().default(null),
    lastGoodCapsuleAt: StatedTime.nullable().default(null),
    areCautionsAccepted: z.literal(true, { error: 'Read the cautions and confirm them before you start.' }),
    steps: z.array(z.string().trim().min(3).max(300)).min(1).max(80),
  })
  .meta({ id: 'StartChangeover', description: 'A change of tooling begins: from, to, the site’s own steps, and the cautions read.' })
export type StartChangeover = z.output<typeof StartChangeover>

export const UpdateStep = z
  .strictObject({ isDone: z.boolean(), remark: z.string().trim().max(500).default('') })
  .meta({ id: 'UpdateStep', description: 'A step done, or taken back, by the person who is signed in.' })
export type UpdateStep = z.output<typeof UpdateStep>

export const FinishChangeover = z
  .strictObject({
    version: Version,
    firstApprovedCapsuleAt: StatedTime.nullable().default(null),
    trials: z.int().min(0).max(100),
    scrappedCapsules: z.int().min(0).max(10_000_000),
    remarks: z.string().trim().max(2_000).default(''),
  })
  .meta({ id: 'FinishChangeover', description: 'The change is done: what it took.' })
export type FinishChangeover = z.output<typeof FinishChangeover>

export const CheckChangeover = z
  .strictObject({ version: Version, password: z.string().min(1).max(1_000) })
  .meta({ id: 'CheckChangeover', description: 'A second person signs that the change was checked.' })
export type CheckChangeover = z.output<typeof CheckChangeover>

const ToolingRef = z.object({ id: Id, code: z.string() })

export const ChangeoverAnswer = z
  .object({
    id: Id,
    siteId: Id,
    machine: ToolingRef,
    batchId: Id.nullable(),
    batchNumber: z.string().nullable(),
    fromToolingSet: ToolingRef.nullable(),
    toToolingSet: ToolingRef,
    state: z.enum(CHANGEOVER_STATES),
    cautionsAcceptedAt: UtcTime,
    startedAt: UtcTime,
    finishedAt: UtcTime.nullable(),
    lastGoodCapsuleAt: UtcTime.nullable(),
    firstApprovedCapsuleAt: UtcTime.nullable(),
    plannedMinutes: z.int().nullable(),
    minutes: z.number().nullable(),
    trials: z.int().nullable(),
    scrappedCapsules: z.int().nullable(),
    remarks: z.string(),
    doneBy: z.string(),
    checkedBy: z.string().nullable(),
    checkedAt: UtcTime.nullable(),
    steps: z.array(
      z.object({
        ordinal: z.int(),
        title: z.string(),
        isRequired: z.boolean(),
        doneAt: UtcTime.nullable(),
        doneBy: z.string().nullable(),
        remark: z.string(),
      }),
    ),
    readings: z.array(
      z.object({
        ordinal: z.int(),
        name: z.string(),
        place: z.string(),
        value: z.number(),
        unit: z.string(),
        lowerLimit: z.number().nullable(),
        upperLimit: z.number().nullable(),
        manualReference: z.string(),
        isWithin: z.boolean(),
        readAt: UtcTime,
        readBy: z.string(),
      }),
    ),
    version: Version,
  })
  .meta({ id: 'Changeover', description: 'A change of tooling with its steps and readings.' })
export type ChangeoverAnswer = z.output<typeof ChangeoverAnswer>

export const ChangeoverListItem = ChangeoverAnswer.omit({ steps: true, readings: true }).meta({
  id: 'ChangeoverListItem',
  description: 'A change of tooling in a list.',
})
export type ChangeoverListItem = z.output<typeof ChangeoverListItem>

export const ChangeoverQuery = z
  .strictObject({
    siteId: Id.optional(),
    machineId: Id.optional(),
    state: z.enum(CHANGEOVER_STATES).optional(),
    limit: z.coerce.number().int().min(1).max(200).default(50),
  })
  .meta({ id: 'ChangeoverQuery', description: 'Which changes of tooling to list.' })
export type ChangeoverQuery = z.output<typeof ChangeoverQuery>
