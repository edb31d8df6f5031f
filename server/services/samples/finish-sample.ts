import type { AbandonSample, CorrectWeighing, SampleAnswer } from '#shared/schemas/samples.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError, NotFoundError } from '../../errors.ts'
import type { Actor } from '../../http/actor.ts'
import { WeighingCorrection } from '../../models/weighing-correction.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { requireBatchState } from '../batches/run-batch.ts'
import { publishEvent } from '../live-events.ts'
import { currentWeighings } from './current-weighings.ts'
import { judgeSample } from './judge-sample.ts'
import { presentSample } from './present-sample.ts'
import { readingOf } from './reading.ts'
import { findSample, requireIncomplete, type SampleContext } from './sample-context.ts'

async function announce({ batch, sample }: SampleContext): Promise<void> {
  await publishEvent({ siteId: batch.siteId, kind: 'sample', subjectId: sample.id, batchId: batch.id })
}

/** Judges a sample whose capsules are all there: summary, verdict, signal, mail, in one transaction. */
export async function completeSample(actor: Actor, sampleId: string): Promise<SampleAnswer> {
  return inTransaction(async () => {
    const context = await findSample(actor, 'sample:record', sampleId, { isLocked: true })
    const { sample, batch } = context
    requireIncomplete(sample)
    const weighed = (await currentWeighings(sampleId)).length
    if (weighed < sample.plannedN) {
      throw new ConflictError(
        'capsules-missing',
        `${weighed} of ${sample.plannedN} capsules are weighed; ${sample.plannedN - weighed} are missing.`,
        { weighed, plannedN: sample.plannedN },
      )
    }
    await judgeSample(context)
    const { n, meanMg, sdMg, verdict } = sample
    await appendAudit({
      actor,
      chain: chainOf.batch(batch.id),
      action: 'sample:complete',
      record: { kind: 'sample', id: sampleId },
      new: { n, meanMg, sdMg, verdict },
    })
    await announce(context)
    return presentSample(context)
  })
}

/** Leaves a sample unfinished, visible and with its reason. */
export async function abandonSample(actor: Actor, sampleId: string, { reason }: AbandonSample): Promise<SampleAnswer> {
  return inTransaction(async () => {
    const context = await findSample(actor, 'sample:record', sampleId, { isLocked: true })
    const { sample, batch } = context
    requireIncomplete(sample)
    const n = (await currentWeighings(sampleId)).length
    await sample.update({ state: 'abandoned', n, abandonedReason: reason, version: sample.version + 1 })
    await appendAudit({
      actor,
      chain: chainOf.batch(batch.id),
      action: 'sample:abandon',
      record: { kind: 'sample', id: sampleId },
      new: { n },
      reason,
    })
    await announce(context)
    return presentSample(context)
  })
}

/** Adds a later version of one weight with its reason; a finished sample is judged again, and the first reading stays. */
export async function correctWeighing(actor: Actor, sampleId: string, ordinal: number, request: CorrectWeighing): Promise<SampleAnswer> {
  return inTransaction(async () => {
    const context = await findSample(actor, 'sample:correct', sampleId, { isLocked: true })
    const { sample, batch } = context
    requireBatchState(batch, ['running', 'ended', 'on-hold'], 'correcting a weight')
    if (sample.state === 'abandoned')
      throw new ConflictError('sample-abandoned', `Sample ${sample.sequence} is abandoned; its weights stay as they are.`)
    const current = (await currentWeighings(sampleId))[ordinal - 1]
    if (!current) throw new NotFoundError('capsule', String(ordinal))
    const reading = readingOf(context, request)
    const version = (current.corrections.at(-1)?.version ?? 1) + 1
    const position = request.position ?? current.position
    await WeighingCorrection.create({
      sampleId,
      ordinal,
      version,
      position,
      ...reading,
      shownDecimals: request.shownDecimals,
      reason: request.reason,
      correctedById: actor.userId,
      correctedAt: new Date(),
    })
    await sample.update({ correctionCount: sample.correctionCount + 1 })
    if (sample.state === 'complete') await judgeSample(context)
    const old = { grossMg: current.grossMg, shellMg: current.shellMg, netMg: current.netMg, position: current.position }
    await appendAudit({
      actor,
      chain: chainOf.batch(batch.id),
      action: 'weight:correct',
      record: { kind: 'weighing', id: `${sampleId}/${ordinal}` },
      old,
      new: { ...reading, position },
      reason: request.reason,
    })
    await announce(context)
    return presentSample(context)
  })
}
