import type { CloseDeviation, DeviationAnswer, OpenDeviation } from '#shared/schemas/release.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError, NotFoundError } from '../../errors.ts'
import { requirePermission, type Actor } from '../../http/actor.ts'
import { Deviation } from '../../models/deviation.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { findBatch } from '../batches/find-batch.ts'
import { requireBatchState } from '../batches/run-batch.ts'
import { requireVersion } from '../require-version.ts'
import { userNames } from '../user-names.ts'

/** A deviation as clients see it. */
export async function presentDeviation(deviation: Deviation): Promise<DeviationAnswer> {
  const names = await userNames([deviation.openedById, deviation.closedById])
  const { id, batchId, number, title, description, cause, effectOnQuality, correction, materialOutcome, state, version } = deviation
  return {
    ...{ id, batchId, number, title, description, cause, effectOnQuality, correction, materialOutcome, state, version },
    openedBy: names.get(deviation.openedById) ?? '',
    openedAt: deviation.openedAt.toISOString(),
    closedBy: deviation.closedById === null ? null : (names.get(deviation.closedById) ?? null),
    closedAt: deviation.closedAt?.toISOString() ?? null,
  }
}

/** Opens a deviation of a batch; its number counts up by site and year. */
export async function openDeviation(actor: Actor, batchId: string, request: OpenDeviation): Promise<DeviationAnswer> {
  return inTransaction(async () => {
    const batch = await findBatch(actor, 'deviation:open', batchId, { isLocked: true })
    requireBatchState(batch, ['running', 'ended', 'on-hold'], 'opening a deviation')
    const now = new Date()
    const year = now.getUTCFullYear()
    const count = await Deviation.count({ where: { siteId: batch.siteId } })
    const number = `D-${year}-${String(count + 1).padStart(4, '0')}`
    const deviation = await Deviation.create({ ...request, siteId: batch.siteId, batchId, number, openedById: actor.userId, openedAt: now })
    await appendAudit({
      actor,
      chain: chainOf.batch(batchId),
      action: 'deviation:open',
      record: { kind: 'deviation', id: deviation.id },
      new: { number, ...request },
    })
    return presentDeviation(deviation)
  })
}

/** Closes a deviation: cause, effect on quality, correction and what became of the material are all said. */
export async function closeDeviation(actor: Actor, id: string, { version, ...findings }: CloseDeviation): Promise<DeviationAnswer> {
  return inTransaction(async () => {
    const deviation = await Deviation.findByPk(id, { lock: true })
    if (!deviation) throw new NotFoundError('deviation', id)
    requirePermission(actor, 'deviation:close', { siteId: deviation.siteId, kind: 'deviation', id })
    requireVersion('deviation', deviation, version)
    if (deviation.state === 'closed') throw new ConflictError('deviation-closed', `Deviation ${deviation.number} is closed already.`)
    await deviation.update({ ...findings, state: 'closed', closedById: actor.userId, closedAt: new Date(), version: version + 1 })
    await appendAudit({
      actor,
      chain: chainOf.batch(deviation.batchId),
      action: 'deviation:close',
      record: { kind: 'deviation', id },
      new: findings,
    })
    return presentDeviation(deviation)
  })
}
