import type { Permission } from '#shared/permissions.ts'
import { NotFoundError } from '../../errors.ts'
import { requirePermission, type Actor } from '../../http/actor.ts'
import { Batch } from '../../models/batch.ts'

/** The batch, if the actor may do this at its site; locked until the transaction ends when it is about to change. */
export async function findBatch(actor: Actor, permission: Permission, batchId: string, { isLocked = false } = {}): Promise<Batch> {
  const batch = await Batch.findByPk(batchId, isLocked ? { lock: true } : {})
  if (!batch) throw new NotFoundError('batch', batchId)
  requirePermission(actor, permission, { siteId: batch.siteId, kind: 'batch', id: batchId })
  return batch
}
