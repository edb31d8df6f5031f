import { z } from 'zod'
import { Id, Version } from './field.ts'
import { changeFields, code, figure, whole, words } from './master-fields.ts'

const scaleEnd = figure({ min: -1_000, max: 1_000, decimals: 3, unit: 'mm' })

const machineFields = {
  code: code(20),
  name: words(120),
  boresPerGroup: whole(1, 60),
  discGroups: whole(1, 24),
  segments: whole(1, 48),
  stations: whole(1, 12),
  indexesPerMinute: figure({ min: 1, max: 300, decimals: 2, unit: 'indexes/min' }),
  scaleMinMm: scaleEnd,
  scaleMaxMm: scaleEnd,
  deeperIsHigher: z.boolean(),
  isActive: z.boolean(),
}

const isScaleOrdered = ({ scaleMinMm, scaleMaxMm }: { scaleMinMm: number; scaleMaxMm: number }): boolean => scaleMinMm < scaleMaxMm
const scaleMessage = { path: ['scaleMaxMm'], message: 'The upper end of the scale must lie above the lower end.' }

export const CreateMachine = z
  .strictObject({ siteId: Id, ...machineFields })
  .refine(isScaleOrdered, scaleMessage)
  .meta({ id: 'CreateMachine', description: 'A capsule filler: its geometry, its usual speed, and how its depth scale reads.' })
export type CreateMachine = z.output<typeof CreateMachine>

export const UpdateMachine = z
  .strictObject({ ...machineFields, ...changeFields })
  .refine(isScaleOrdered, scaleMessage)
  .meta({ id: 'UpdateMachine', description: 'A machine as it shall be, the version that was seen, and why.' })
export type UpdateMachine = z.output<typeof UpdateMachine>

export const MachineAnswer = z
  .object({
    id: Id,
    siteId: Id,
    code: z.string(),
    name: z.string(),
    boresPerGroup: z.int(),
    discGroups: z.int(),
    segments: z.int(),
    stations: z.int(),
    indexesPerMinute: z.number(),
    scaleMinMm: z.number(),
    scaleMaxMm: z.number(),
    deeperIsHigher: z.boolean(),
    isActive: z.boolean(),
    /** Batches were planned on it, so its geometry is part of their record. */
    hasBatches: z.boolean(),
    version: Version,
  })
  .meta({ id: 'Machine', description: 'A capsule filler and its geometry.' })
export type MachineAnswer = z.output<typeof MachineAnswer>

export const MachineId = z.object({ machineId: Id })
