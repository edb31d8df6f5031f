import type { ScenarioDeviation, ScenarioDisposition } from '#fixtures/scenario/run-records.ts'
import { Deviation } from '../../models/deviation.ts'
import { Disposition } from '../../models/disposition.ts'
import { newId } from '../../models/new-id.ts'
import { Signature } from '../../models/signature.ts'
import { chainOf } from '../audit.ts'
import { contentHash } from '../signatures.ts'
import { demoSignature } from './demo-signature.ts'
import { insertAll } from './insert-all.ts'
import type { StoredBatch } from './store-batches.ts'
import type { DemoContext } from './store-masters.ts'

const MEANING = { release: 'released', hold: 'put on hold', reject: 'rejected' } as const

/** Stores what was signed about each batch: the start-up, its deviations, and what quality decided. */
export async function storeDecisions(batches: readonly StoredBatch[], context: DemoContext): Promise<void> {
  const startUps = batches.flatMap((batch) => signStartUp(batch, context))
  const decisions = batches.flatMap((batch) => batch.batch.dispositions.map((one, place) => decide(batch, one, place + 1, context)))
  await insertAll(Signature, [...startUps, ...decisions.map(({ signature }) => signature)])
  await insertAll(
    Disposition,
    decisions.map(({ row }) => row),
  )
  await insertAll(
    Deviation,
    batches.flatMap((batch) => batch.batch.deviations.map((one) => deviationRow(batch, one, context))),
  )
}

function signStartUp({ id, batch, samples }: StoredBatch, { siteId, people, book }: DemoContext) {
  const first = samples.find(({ sample }) => sample.kind === 'start-up')
  if (!first) return []
  const { by, at } = batch.startUpApproved
  const { id: sampleId, meanMg, sdMg, n } = first.row
  const content = { batchId: id, sampleId, meanMg, sdMg, n }
  book.note(at, people.find(by), { chain: chainOf.batch(id), action: 'start-up:approve', record: { kind: 'batch', id }, new: content })
  return [demoSignature(people.find(by), { siteId, meaning: 'start-up approved', record: { kind: 'start-up', id }, content, signedAt: at })]
}

/** What was on the table when quality decided: the batch, every sample with its verdict, its deviations. */
function recordOf({ row, batch, samples }: StoredBatch, { decision, reason }: ScenarioDisposition) {
  const { id, number, plannedCapsules, startedAt, endedAt, assayPercent, goodCapsules, rejectedCapsules, setUpScrapCapsules } = row
  return {
    batch: { id, number, plannedCapsules, startedAt, endedAt, assayPercent, goodCapsules, rejectedCapsules, setUpScrapCapsules },
    samples: samples.map(({ row: { id: sampleId, sequence, kind, basis, state, n, meanMg, sdMg }, verdict }) => ({
      ...{ id: sampleId, sequence, kind, basis, state, n, meanMg, sdMg, verdict: verdict?.verdict ?? null },
    })),
    deviations: batch.deviations.map(({ number: deviation, title, state }) => ({ number: deviation, title, state })),
    ...{ decision, reason },
  }
}

function decide(stored: StoredBatch, one: ScenarioDisposition, sequence: number, { siteId, people, book }: DemoContext) {
  const content = recordOf(stored, one)
  const person = people.find(one.decidedBy)
  const { decision, reason, decidedAt } = one
  const record = { kind: 'disposition', id: stored.id }
  const signature = demoSignature(person, { siteId, meaning: MEANING[decision], reason, record, content, signedAt: decidedAt })
  const chain = chainOf.batch(stored.id)
  book.note(decidedAt, person, {
    chain,
    action: 'batch:dispose',
    record: { kind: 'batch', id: stored.id },
    new: { decision, contentHash: signature.contentHash },
    reason,
  })
  const row = {
    ...{ id: newId(), batchId: stored.id, sequence, decision, reason, contentHash: contentHash(content), record: content },
    ...{ signatureId: signature.id, decidedById: person.id, decidedAt },
  }
  return { row, signature }
}

function deviationRow({ id: batchId }: StoredBatch, one: ScenarioDeviation, { siteId, people, book }: DemoContext) {
  const { number, title, description, openedAt, state, closing } = one
  const id = newId()
  const chain = chainOf.batch(batchId)
  const record = { kind: 'deviation', id }
  book.note(openedAt, people.find(one.openedBy), { chain, action: 'deviation:open', record, new: { number, title, description } })
  const row = { id, siteId, batchId, number, title, description, state, openedById: people.find(one.openedBy).id, openedAt }
  if (!closing) return row
  const { by, at, ...said } = closing
  book.note(at, people.find(by), { chain, action: 'deviation:close', record, new: { ...said, state: 'closed' } })
  return { ...row, ...said, closedById: people.find(by).id, closedAt: at }
}
