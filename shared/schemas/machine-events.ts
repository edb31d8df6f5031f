import { z } from 'zod'
import { MACHINE_EVENT_KINDS, MACHINE_SETTINGS } from '../vocabulary.ts'
import { Id, StatedTime, UtcTime } from './field.ts'

const Happened = { happenedAt: StatedTime.optional(), reason: z.string().trim().max(1_000).default('') }

/** What a person may record at a machine; start and end of a run and changeovers are recorded by those steps themselves. */
export const RecordEvent = z
  .discriminatedUnion('kind', [
    z.strictObject({
      kind: z.literal('adjustment'),
      setting: z.enum(MACHINE_SETTINGS),
      station: z.int().min(1).max(12).nullable().default(null),
      valueFrom: z.number().min(-10_000).max(10_000),
      valueTo: z.number().min(-10_000).max(10_000),
      happenedAt: StatedTime.optional(),
      reason: z.string().trim().min(3, 'Say why the setting was moved.').max(1_000),
    }),
    z.strictObject({ kind: z.literal('stop'), ...Happened }),
    z.strictObject({ kind: z.literal('start'), ...Happened }),
    z.strictObject({
      kind: z.literal('speed'),
      valueFrom: z.number().positive().max(300),
      valueTo: z.number().positive().max(300),
      ...Happened,
    }),
    z.strictObject({ kind: z.literal('refill'), ...Happened }),
    z.strictObject({ kind: z.literal('shell-lot'), shellLotId: Id, ...Happened }),
    z.strictObject({ kind: z.literal('blend-container'), label: z.string().trim().min(1).max(120), ...Happened }),
  ])
  .meta({ id: 'RecordEvent', description: 'Something that happened at the machine during a run.' })
export type RecordEvent = z.output<typeof RecordEvent>

export const MachineEventAnswer = z
  .object({
    id: Id,
    batchId: Id.nullable(),
    kind: z.enum(MACHINE_EVENT_KINDS),
    happenedAt: UtcTime,
    recordedAt: UtcTime,
    station: z.int().nullable(),
    setting: z.enum(MACHINE_SETTINGS).nullable(),
    valueFrom: z.number().nullable(),
    valueTo: z.number().nullable(),
    unit: z.string().nullable(),
    label: z.string(),
    reason: z.string(),
    recordedBy: z.string(),
  })
  .meta({ id: 'MachineEvent', description: 'Something that happened at a machine.' })
export type MachineEventAnswer = z.output<typeof MachineEventAnswer>
