import type { ApproveStartUp, BatchAnswer, EndBatch, SetAssay, StartBatch } from '#shared/schemas/batches.ts'
import type { BatchState } from '#shared/vocabulary.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError } from '../../errors.ts'
import type { Actor } from '../../http/actor.ts'
import type { Client } from '../../http/client.ts'
import { Batch } from '../../models/batch.ts'
import { MachineEvent } from '../../models/machine-event.ts'
import { Sample } from '../../models/sample.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { signRecord } from '../signatures.ts'
import { requireVersion } from '../require-version.ts'
import { findBatch } from './find-batch.ts'
import { presentBatch } from './present-batch.ts'

/** Refuses a step that the batch's state does not allow, naming both. */
export function requireBatchState(batch: Batch, allowed: readonly BatchState[], step: string): void {
  if (allowed.includes(batch.state)) return
  throw new ConflictError(
    `batch-not-${allowed[0] ?? 'open'}`,
    `Batch ${batch.number} is ${batch.state}; ${step} needs it to be ${allowed.join(' or ')}.`,
    { state: batch.state },
  )
}

async function recordLife(actor: Actor, batch: Batch, kind: 'start' | 'stop', at: Date): Promise<void> {
  const { siteId, machineId, id: batchId } = batch
  await MachineEvent.create({
    siteId,
    machineId,
    batchId,
    kind,
    happenedAt: at,
    recordedAt: at,
    recordedById: actor.userId,
    label: kind === 'stop' ? 'end of run' : '',
  })
}

/** Starts the run; only one batch runs on a machine at a time. */
export async function startBatch(actor: Actor, batchId: string, { version }: StartBatch): Promise<BatchAnswer> {
  return inTransaction(async () => {
    const batch = await findBatch(actor, 'batch:run', batchId, { isLocked: true })
    requireVersion('batch', batch, version)
    requireBatchState(batch, ['planned'], 'starting it')
    const other = await Batch.findOne({ where: { machineId: batch.machineId, state: 'running' }, lock: true })
    if (other)
      throw new ConflictError('machine-busy', `Batch ${other.number} is running on this machine; end it first.`, { batchId: other.id })
    const now = new Date()
    await batch.update({ state: 'running', startedAt: now, version: version + 1 })
    await recordLife(actor, batch, 'start', now)
    await appendAudit({
      actor,
      chain: chainOf.batch(batch.id),
      action: 'batch:start',
      record: { kind: 'batch', id: batch.id },
      old: { state: 'planned' },
      new: { state: 'running' },
    })
    return presentBatch(batch)
  })
}

/** Signs the start-up: routine samples may follow. Needs a complete start-up sample that is not beyond action. */
export async function approveStartUp(
  actor: Actor,
  batchId: string,
  { version, password }: ApproveStartUp,
  client: Client,
): Promise<BatchAnswer> {
  return inTransaction(async () => {
    const batch = await findBatch(actor, 'start-up:approve', batchId, { isLocked: true })
    requireVersion('batch', batch, version)
    requireBatchState(batch, ['running'], 'approving its start-up')
    if (batch.startUpApprovedAt) throw new ConflictError('start-up-approved', `The start-up of batch ${batch.number} is approved already.`)
    const last = await Sample.findOne({ where: { batchId, kind: 'start-up', state: 'complete' }, order: [['sequence', 'DESC']] })
    if (!last) throw new ConflictError('no-start-up-sample', 'Weigh a start-up sample first; there is none to approve.')
    if (last.verdict === 'action')
      throw new ConflictError('start-up-beyond-action', 'The last start-up sample is beyond an action limit; correct and weigh again.')
    const content = { batchId, sampleId: last.id, meanMg: last.meanMg, sdMg: last.sdMg, n: last.n }
    const signature = await signRecord(actor, {
      siteId: batch.siteId,
      meaning: 'start-up approved',
      record: { kind: 'start-up', id: batch.id },
      content,
      password,
      client,
    })
    await batch.update({ startUpApprovedAt: signature.signedAt, startUpApprovedById: actor.userId, version: version + 1 })
    await appendAudit({
      actor,
      chain: chainOf.batch(batch.id),
      action: 'start-up:approve',
      record: { kind: 'batch', id: batch.id },
      new: content,
    })
    return presentBatch(batch)
  })
}

/** Ends the run and books what came out. */
export async function endBatch(actor: Actor, batchId: string, { version, ...counts }: EndBatch): Promise<BatchAnswer> {
  return inTransaction(async () => {
    const batch = await findBatch(actor, 'batch:run', batchId, { isLocked: true })
    requireVersion('batch', batch, version)
    requireBatchState(batch, ['running'], 'ending it')
    const unfinished = await Sample.count({ where: { batchId, state: 'incomplete' } })
    if (unfinished > 0)
      throw new ConflictError(
        'samples-unfinished',
        `${unfinished} sample${unfinished === 1 ? ' is' : 's are'} unfinished: complete or abandon them first.`,
      )
    const now = new Date()
    await batch.update({ ...counts, state: 'ended', endedAt: now, version: version + 1 })
    await recordLife(actor, batch, 'stop', now)
    await appendAudit({
      actor,
      chain: chainOf.batch(batch.id),
      action: 'batch:end',
      record: { kind: 'batch', id: batch.id },
      old: { state: 'running' },
      new: { state: 'ended', ...counts },
    })
    return presentBatch(batch)
  })
}

/** Books the assay that weight variation needs (contents are estimated as weight × assay ÷ mean weight). */
export async function setAssay(actor: Actor, batchId: string, { version, assayPercent, reason }: SetAssay): Promise<BatchAnswer> {
  return inTransaction(async () => {
    const batch = await findBatch(actor, 'batch:dispose', batchId, { isLocked: true })
    requireVersion('batch', batch, version)
    requireBatchState(batch, ['planned', 'running', 'ended', 'on-hold'], 'setting its assay')
    const old = { assayPercent: batch.assayPercent }
    await batch.update({ assayPercent, version: version + 1 })
    await appendAudit({
      actor,
      chain: chainOf.batch(batch.id),
      action: 'batch:set-assay',
      record: { kind: 'batch', id: batch.id },
      old,
      new: { assayPercent },
      reason,
    })
    return presentBatch(batch)
  })
}
