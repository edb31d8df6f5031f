import type { ToolingPartAnswer, ToolingPartRequest } from '#shared/schemas/tooling-sets.ts'
import { InvalidFieldError } from '../../errors.ts'
import { ToolingPart } from '../../models/tooling-part.ts'

/** A part as clients see it; an inspection is due once more capsules than its interval were made since the last one. */
export function presentPart(part: ToolingPart): ToolingPartAnswer {
  const { id, kind, serial, station, inspectionInterval, capsulesAtFitting, capsulesAtInspection, capsulesNow, version } = part
  const capsulesSinceInspection = capsulesNow - capsulesAtInspection
  const isInspectionDue = inspectionInterval !== null && capsulesSinceInspection >= inspectionInterval
  const counts = { capsulesAtFitting, capsulesAtInspection, capsulesNow, capsulesSinceInspection }
  return { id, kind, serial, station, inspectionInterval, ...counts, isInspectionDue, version }
}

/**
 * Brings the parts of a set to what was asked for: known ones change, new ones come in with their count, and those that
 * are left out are marked as taken out. A part that was taken out and comes back is the same part again.
 * @param stored every part that the set ever had
 */
export async function saveParts(
  toolingSetId: string,
  stored: readonly ToolingPart[],
  wanted: readonly ToolingPartRequest[],
): Promise<void> {
  const fitted = new Map(stored.filter(({ removedAt }) => removedAt === null).map((part) => [part.id, part]))
  for (const [place, { id }] of wanted.entries()) {
    if (id !== undefined && !fitted.has(id)) throw new InvalidFieldError(`/parts/${place}/id`, 'This part does not belong to the set.')
  }
  const kept = new Set(wanted.map(({ id }) => id))
  for (const part of fitted.values()) if (!kept.has(part.id)) await part.update({ removedAt: new Date(), version: part.version + 1 })
  for (const { id, capsulesAtFitting, ...fields } of wanted) {
    const counts = { capsulesAtFitting, capsulesAtInspection: capsulesAtFitting, capsulesNow: capsulesAtFitting }
    const returning = stored.find(({ kind, serial, removedAt }) => removedAt !== null && kind === fields.kind && serial === fields.serial)
    const part = id === undefined ? returning : fitted.get(id)
    if (!part) await ToolingPart.create({ toolingSetId, ...fields, ...counts })
    else if (part === returning) await part.update({ ...fields, ...counts, removedAt: null, version: part.version + 1 })
    else await part.update({ ...fields, version: part.version + 1 })
  }
}
