import type { DecideBatch, DispositionAnswer, ReleaseReview } from '#shared/schemas/release.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError } from '../../errors.ts'
import type { Actor } from '../../http/actor.ts'
import type { Client } from '../../http/client.ts'
import type { Batch } from '../../models/batch.ts'
import { Disposition } from '../../models/disposition.ts'
import { Sample } from '../../models/sample.ts'
import { Signature } from '../../models/signature.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { findBatch } from '../batches/find-batch.ts'
import { requireBatchState } from '../batches/run-batch.ts'
import { publishEvent } from '../live-events.ts'
import { requireVersion } from '../require-version.ts'
import { contentHash, signRecord } from '../signatures.ts'
import { userNames } from '../user-names.ts'
import { readBatchRecord } from './batch-record.ts'
import { releaseChecklist } from './checklist.ts'

const MEANINGS = { release: 'released', hold: 'put on hold', reject: 'rejected' } as const
const STATES = { release: 'released', hold: 'on-hold', reject: 'rejected' } as const

/** The decisions on a batch with their signatures, oldest first. */
export async function listDispositions(batchId: string): Promise<DispositionAnswer[]> {
  const dispositions = await Disposition.findAll({ where: { batchId }, order: [['sequence', 'ASC']] })
  const signatures = await Signature.findAll({ where: { id: dispositions.map(({ signatureId }) => signatureId) } })
  const names = await userNames(dispositions.map(({ decidedById }) => decidedById))
  return dispositions.map(({ id, sequence, decision, reason, contentHash: hash, decidedById, decidedAt, signatureId }) => ({
    ...{ id, sequence, decision, reason, contentHash: hash },
    decidedBy: names.get(decidedById) ?? '',
    decidedAt: decidedAt.toISOString(),
    meaning: signatures.find((signature) => signature.id === signatureId)?.meaning ?? '',
  }))
}

/** What the quality unit sees: checklist, acceptance, deviations, earlier decisions, and the hash of the record it would sign. */
export async function readReleaseReview(actor: Actor, batchId: string): Promise<ReleaseReview> {
  const batch = await findBatch(actor, 'record:read', batchId)
  const record = await readBatchRecord(batch)
  const checklist = releaseChecklist(record)
  return {
    checklist,
    acceptance: record.acceptance,
    deviations: record.deviations,
    dispositions: await listDispositions(batchId),
    contentHash: contentHash(record),
    mayRelease: checklist.every(({ blocks }) => !blocks) && (batch.state === 'ended' || batch.state === 'on-hold'),
  }
}

/** Whoever weighed does not release: the one who decides had no hand in the samples. */
async function requireNoHand(actor: Actor, batch: Batch): Promise<void> {
  const own = await Sample.count({ where: { batchId: batch.id, weighedById: actor.userId } })
  if (own > 0 || batch.startUpApprovedById === actor.userId) {
    throw new ConflictError('same-person', 'You weighed samples of this batch or approved its start-up; somebody else has to decide on it.')
  }
}

/**
 * Release, hold or reject, by signature over exactly the record that was shown. Release is refused while anything on the
 * checklist blocks. After release or rejection the batch takes no more changes.
 */
export async function decideBatch(actor: Actor, batchId: string, request: DecideBatch, client: Client): Promise<DispositionAnswer> {
  const { version, decision, reason, password } = request
  return inTransaction(async () => {
    const batch = await findBatch(actor, 'batch:dispose', batchId, { isLocked: true })
    requireVersion('batch', batch, version)
    requireBatchState(batch, ['ended', 'on-hold'], `the decision “${MEANINGS[decision]}”`)
    await requireNoHand(actor, batch)
    const record = await readBatchRecord(batch)
    if (contentHash(record) !== request.contentHash) {
      throw new ConflictError('record-changed', 'The record changed since you looked at it. Look again before you sign.')
    }
    const blocking = releaseChecklist(record).filter(({ blocks }) => blocks)
    if (decision === 'release' && blocking.length > 0) {
      throw new ConflictError('release-blocked', `Release is not possible yet: ${blocking.map(({ sentence }) => sentence).join(' ')}`, {
        blocking: blocking.map(({ name }) => name),
      })
    }
    const signature = await signRecord(actor, {
      siteId: batch.siteId,
      meaning: MEANINGS[decision],
      reason,
      record: { kind: 'disposition', id: batchId },
      content: record,
      password,
      client,
    })
    const sequence = 1 + (await Disposition.count({ where: { batchId } }))
    await Disposition.create({
      batchId,
      sequence,
      decision,
      reason,
      contentHash: signature.contentHash,
      record,
      signatureId: signature.id,
      decidedById: actor.userId,
      decidedAt: signature.signedAt,
    })
    await batch.update({ state: STATES[decision], version: version + 1 })
    await appendAudit({
      actor,
      chain: chainOf.batch(batchId),
      action: 'batch:dispose',
      record: { kind: 'batch', id: batchId },
      new: { decision, contentHash: signature.contentHash },
      reason,
    })
    await publishEvent({ siteId: batch.siteId, kind: 'disposition', subjectId: batchId, batchId })
    const answer = (await listDispositions(batchId)).at(-1)
    if (!answer) throw new Error('The decision was stored but cannot be read.')
    return answer
  })
}
