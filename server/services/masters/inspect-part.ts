import type { InspectPart, ToolingSetAnswer } from '#shared/schemas/tooling-sets.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { NotFoundError } from '../../errors.ts'
import type { Actor } from '../../http/actor.ts'
import { ToolingPart } from '../../models/tooling-part.ts'
import { ToolingSet } from '../../models/tooling-set.ts'
import { requireVersion } from '../require-version.ts'
import { findMaster, noteMaster } from './master-record.ts'
import { presentPart } from './tooling-parts.ts'
import { presentStoredSet } from './tooling-sets.ts'

/** Books an inspection of a part: its count since inspection starts again. */
export async function inspectPart(
  actor: Actor,
  { toolingSetId, partId }: { toolingSetId: string; partId: string },
  { version, remarks }: InspectPart,
): Promise<ToolingSetAnswer> {
  return inTransaction(async () => {
    const set = await findMaster(ToolingSet, actor, { permission: 'tooling:write', kind: 'tooling set', id: toolingSetId, isLocked: true })
    const part = await ToolingPart.findOne({ where: { id: partId, toolingSetId, removedAt: null }, lock: true })
    if (!part) throw new NotFoundError('tooling part', partId)
    requireVersion('tooling part', part, version)
    const old = presentPart(part)
    await part.update({ capsulesAtInspection: part.capsulesNow, version: version + 1 })
    await noteMaster(actor, {
      siteId: set.siteId,
      action: 'tooling-part:inspect',
      record: { kind: 'tooling-part', id: partId },
      old,
      new: presentPart(part),
      reason: remarks,
    })
    return presentStoredSet(set)
  })
}
