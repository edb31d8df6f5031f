import { Op } from 'sequelize'
import type { AcknowledgeSignal, CloseSignal, SignalAnswer, SignalQuery } from '#shared/schemas/signals.ts'
import type { Permission } from '#shared/permissions.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError, NotFoundError } from '../../errors.ts'
import { requirePermission, sitesWith, type Actor } from '../../http/actor.ts'
import { Batch } from '../../models/batch.ts'
import { Sample } from '../../models/sample.ts'
import { Signal } from '../../models/signal.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { publishEvent } from '../live-events.ts'
import { requireVersion } from '../require-version.ts'
import { userNames } from '../user-names.ts'

/** Signals as clients see them; batches, samples and people are each read once. */
export async function presentSignals(signals: readonly Signal[]): Promise<SignalAnswer[]> {
  const batches = await Batch.findAll({ where: { id: [...new Set(signals.map(({ batchId }) => batchId))] }, attributes: ['id', 'number'] })
  const samples = await Sample.findAll({ where: { id: signals.map(({ sampleId }) => sampleId) }, attributes: ['id', 'sequence'] })
  const numbers = new Map(batches.map(({ id, number }) => [id, number]))
  const sequences = new Map(samples.map(({ id, sequence }) => [id, sequence]))
  const names = await userNames(signals.flatMap(({ acknowledgedById, closedById }) => [acknowledgedById, closedById]))
  const nameOf = (id: string | null): string | null => (id === null ? null : (names.get(id) ?? null))
  return signals.map((signal) => {
    const { id, batchId, sampleId, severity, sources, sentence, state, cause, reaction, version } = signal
    return {
      ...{ id, batchId, sampleId, severity, sources, sentence, state, cause, reaction, version },
      batchNumber: numbers.get(batchId) ?? '',
      sampleSequence: sequences.get(sampleId) ?? 0,
      raisedAt: signal.raisedAt.toISOString(),
      acknowledgedBy: nameOf(signal.acknowledgedById),
      acknowledgedAt: signal.acknowledgedAt?.toISOString() ?? null,
      closedBy: nameOf(signal.closedById),
      closedAt: signal.closedAt?.toISOString() ?? null,
    }
  })
}

/** The signals of the actor's sites, newest first. */
export async function listSignals(actor: Actor, { siteId, batchId, state, limit }: SignalQuery): Promise<SignalAnswer[]> {
  const own = sitesWith(actor, 'record:read').filter((id) => siteId === undefined || id === siteId)
  const batches = await Batch.findAll({ where: { siteId: own, ...(batchId === undefined ? {} : { id: batchId }) }, attributes: ['id'] })
  const states = state === undefined ? {} : { state: state === 'open' ? { [Op.ne]: 'closed' } : state }
  const signals = await Signal.findAll({ where: { batchId: batches.map(({ id }) => id), ...states }, order: [['raisedAt', 'DESC']], limit })
  return presentSignals(signals)
}

async function findSignal(actor: Actor, permission: Permission, id: string): Promise<{ signal: Signal; batch: Batch }> {
  const signal = await Signal.findByPk(id, { lock: true })
  const batch = signal && (await Batch.findByPk(signal.batchId))
  if (!batch) throw new NotFoundError('signal', id)
  requirePermission(actor, permission, { siteId: batch.siteId, kind: 'signal', id })
  return { signal, batch }
}

async function answered(
  actor: Actor,
  { signal, batch }: { signal: Signal; batch: Batch },
  action: string,
  what: object,
): Promise<SignalAnswer> {
  await appendAudit({ actor, chain: chainOf.batch(batch.id), action, record: { kind: 'signal', id: signal.id }, new: what })
  await publishEvent({ siteId: batch.siteId, kind: 'signal', subjectId: signal.id, batchId: batch.id })
  const [answer] = await presentSignals([signal])
  if (!answer) throw new Error('A signal could not be presented.')
  return answer
}

/** Somebody has seen the signal and acts; it is not solved by that. */
export async function acknowledgeSignal(actor: Actor, id: string, { version }: AcknowledgeSignal): Promise<SignalAnswer> {
  return inTransaction(async () => {
    const found = await findSignal(actor, 'signal:acknowledge', id)
    const { signal } = found
    requireVersion('signal', signal, version)
    if (signal.state !== 'active' && signal.state !== 'returned')
      throw new ConflictError('signal-acknowledged', `This signal is ${signal.state} already.`, { state: signal.state })
    await signal.update({ state: 'acknowledged', acknowledgedById: actor.userId, acknowledgedAt: new Date(), version: version + 1 })
    return answered(actor, found, 'signal:acknowledge', {})
  })
}

/** Closes a signal with its cause and what was done. */
export async function closeSignal(actor: Actor, id: string, { version, cause, reaction }: CloseSignal): Promise<SignalAnswer> {
  return inTransaction(async () => {
    const found = await findSignal(actor, 'signal:close', id)
    const { signal } = found
    requireVersion('signal', signal, version)
    if (signal.state === 'closed') throw new ConflictError('signal-closed', 'This signal is closed already.')
    const now = new Date()
    const seen = signal.acknowledgedAt ? {} : { acknowledgedById: actor.userId, acknowledgedAt: now }
    await signal.update({ ...seen, state: 'closed', cause, reaction, closedById: actor.userId, closedAt: now, version: version + 1 })
    return answered(actor, found, 'signal:close', { cause, reaction })
  })
}
