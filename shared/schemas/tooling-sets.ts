import { z } from 'zod'
import { TOOLING_PART_KINDS } from '../vocabulary.ts'
import { Id, Reason, Version } from './field.ts'
import { CapsuleSizeName, changeFields, code, figure, remarks, whole, words } from './master-fields.ts'

/** More than any part lives through; below 2^53, so that no count is rounded. */
const MOST_CAPSULES = 100_000_000_000

const partFields = {
  kind: z.enum(TOOLING_PART_KINDS),
  serial: words(40),
  station: whole(1, 12).nullable(),
  inspectionInterval: whole(1, MOST_CAPSULES).nullable(),
}

export const ToolingPartRequest = z
  .strictObject({ id: Id.optional(), ...partFields, capsulesAtFitting: whole(0, MOST_CAPSULES).default(0) })
  .meta({
    id: 'ToolingPartRequest',
    description: 'One part: without an identifier it is a new one, fitted with the capsules it has made so far.',
  })
export type ToolingPartRequest = z.output<typeof ToolingPartRequest>

const setFields = {
  code: code(20),
  capsuleSize: CapsuleSizeName,
  boresPerGroup: whole(1, 60),
  discThicknessMm: figure({ min: 1, max: 100, decimals: 3, unit: 'mm' }),
  remarks: remarks(500),
  isActive: z.boolean(),
  parts: z.array(ToolingPartRequest).max(200),
}

interface SerialParts {
  parts: readonly { kind: string; serial: string }[]
}

function refuseTwins({ parts }: SerialParts, context: z.RefinementCtx): void {
  for (const [place, { kind, serial }] of parts.entries()) {
    const twin = parts.findIndex((part) => part.kind === kind && part.serial.toLowerCase() === serial.toLowerCase())
    if (twin < place) context.addIssue({ code: 'custom', path: ['parts', place, 'serial'], message: 'This part is in the list already.' })
  }
}

export const CreateToolingSet = z
  .strictObject({ siteId: Id, ...setFields })
  .superRefine(refuseTwins)
  .meta({ id: 'CreateToolingSet', description: 'A tooling set for one capsule size, with its parts.' })
export type CreateToolingSet = z.output<typeof CreateToolingSet>

export const UpdateToolingSet = z
  .strictObject({ ...setFields, ...changeFields })
  .superRefine(refuseTwins)
  .meta({ id: 'UpdateToolingSet', description: 'A tooling set as it shall be with all its parts, the version that was seen, and why.' })
export type UpdateToolingSet = z.output<typeof UpdateToolingSet>

export const InspectPart = z
  .strictObject({ version: Version, remarks: Reason })
  .meta({ id: 'InspectPart', description: 'A part was inspected now: what was found, and the version of the part that was seen.' })
export type InspectPart = z.output<typeof InspectPart>

export const ToolingPartAnswer = z
  .object({
    id: Id,
    ...partFields,
    serial: z.string(),
    station: z.int().nullable(),
    inspectionInterval: z.int().nullable(),
    capsulesAtFitting: z.int(),
    capsulesAtInspection: z.int(),
    capsulesNow: z.int(),
    /** Capsules made since the last inspection, and whether that is more than the interval. */
    capsulesSinceInspection: z.int(),
    isInspectionDue: z.boolean(),
    version: Version,
  })
  .meta({ id: 'ToolingPart', description: 'One part of a tooling set and the capsules made through it.' })
export type ToolingPartAnswer = z.output<typeof ToolingPartAnswer>

export const ToolingSetAnswer = z
  .object({
    id: Id,
    siteId: Id,
    code: z.string(),
    capsuleSize: z.string(),
    boresPerGroup: z.int(),
    discThicknessMm: z.number(),
    remarks: z.string(),
    isActive: z.boolean(),
    hasBatches: z.boolean(),
    parts: z.array(ToolingPartAnswer),
    version: Version,
  })
  .meta({ id: 'ToolingSet', description: 'The parts for one capsule size that are fitted together.' })
export type ToolingSetAnswer = z.output<typeof ToolingSetAnswer>

export const ToolingSetId = z.object({ toolingSetId: Id })
export const ToolingPartId = z.object({ toolingSetId: Id, partId: Id })
