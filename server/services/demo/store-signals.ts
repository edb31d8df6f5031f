import { Signal } from '../../models/signal.ts'
import { newId } from '../../models/new-id.ts'
import { chainOf } from '../audit.ts'
import { enqueueMail } from '../enqueue-mail.ts'
import { insertAll } from './insert-all.ts'
import type { StoredBatch } from './store-batches.ts'
import type { DemoContext } from './store-masters.ts'

const MINUTE_MS = 60_000
const ACKNOWLEDGED_AFTER_MS = 8 * MINUTE_MS
const CLOSED_AFTER_MS = 40 * MINUTE_MS
const SENTENCE_MAX = 1000

const after = (moment: Date, ms: number): Date => new Date(moment.getTime() + ms)

/** Raises the signal of each sample that was beyond a limit; those of decided batches are closed, the newest are still active. */
export async function storeSignals(batches: readonly StoredBatch[], context: DemoContext, now: Date): Promise<void> {
  const rows = batches.flatMap((batch) => signalRows(batch, context, now))
  await insertAll(
    Signal,
    rows.map(({ row }) => row),
  )
  for (const { row } of rows) if (row.state === 'active' && row.severity === 'action') await mailEngineers(row, context)
  for (const { row, acknowledgedBy, closedBy } of rows) {
    const { people, book } = context
    const chain = chainOf.batch(row.batchId)
    const record = { kind: 'signal', id: row.id }
    if (row.acknowledgedAt && acknowledgedBy !== null) {
      book.note(row.acknowledgedAt, people.find(acknowledgedBy), {
        chain,
        action: 'signal:acknowledge',
        record,
        new: {},
      })
    }
    if (row.closedAt && closedBy !== null) {
      const closing = { cause: row.cause, reaction: row.reaction }
      book.note(row.closedAt, people.find(closedBy), { chain, action: 'signal:close', record, new: closing })
    }
  }
}

/** Only what is still open is mailed: nobody wants eight weeks of old alarms. */
function mailEngineers({ id, number, sentence }: { id: string; number: string; sentence: string }, { siteId }: DemoContext): Promise<void> {
  return enqueueMail({ siteId, role: 'engineer', subject: `Action: batch ${number}`, text: sentence, signalId: id })
}

function signalRows({ id: batchId, batch, samples }: StoredBatch, { people }: DemoContext, now: Date) {
  return samples.flatMap(({ sample, row: sampleOf, verdict }) => {
    if (!verdict || verdict.verdict === 'in-control' || !sample.completedAt) return []
    const raisedAt = sample.completedAt
    const isOld = now.getTime() - raisedAt.getTime() > 2 * CLOSED_AFTER_MS
    const isClosed = batch.followUp !== null && batch.state !== 'on-hold'
    const isSeen = isClosed || isOld || batch.followUp !== null
    const acknowledgedBy = isSeen ? (batch.followUp?.acknowledgedBy ?? sample.weighedBy) : null
    const closedBy = isClosed ? (batch.followUp?.closedBy ?? null) : null
    const row = {
      ...{
        id: newId(),
        batchId,
        number: batch.number,
        sampleId: sampleOf.id,
        severity: verdict.verdict,
        sources: verdict.sources,
        raisedAt,
      },
      sentence: verdict.sources
        .map((source) => source.sentence)
        .join(' ')
        .slice(0, SENTENCE_MAX),
      state: isClosed ? ('closed' as const) : isSeen ? ('acknowledged' as const) : ('active' as const),
      acknowledgedById: acknowledgedBy === null ? null : people.find(acknowledgedBy).id,
      acknowledgedAt: isSeen ? after(raisedAt, ACKNOWLEDGED_AFTER_MS) : null,
      ...(isClosed && batch.followUp
        ? { cause: batch.followUp.cause, reaction: batch.followUp.reaction }
        : { cause: null, reaction: null }),
      closedById: closedBy === null ? null : people.find(closedBy).id,
      closedAt: isClosed ? after(raisedAt, CLOSED_AFTER_MS) : null,
    }
    return [{ row, acknowledgedBy, closedBy }]
  })
}
