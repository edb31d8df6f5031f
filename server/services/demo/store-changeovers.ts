import type { ScenarioChangeover } from '#fixtures/scenario/run-records.ts'
import { Changeover } from '../../models/changeover.ts'
import { ChangeoverReading } from '../../models/changeover-reading.ts'
import { ChangeoverStep } from '../../models/changeover-step.ts'
import { MachineEvent } from '../../models/machine-event.ts'
import { newId } from '../../models/new-id.ts'
import { Signature } from '../../models/signature.ts'
import { chainOf } from '../audit.ts'
import { presentChangeover } from '../changeovers/present-changeover.ts'
import { demoSignature } from './demo-signature.ts'
import { insertAll } from './insert-all.ts'
import type { StoredBatch } from './store-batches.ts'
import { idOf, type DemoContext, type DemoMasters } from './store-masters.ts'

type Row = ReturnType<typeof changeoverRow>

function changeoverRow(one: ScenarioChangeover, masters: DemoMasters, { siteId, people }: DemoContext, batchId: string | null) {
  const { startedAt, finishedAt, lastGoodCapsuleAt, firstApprovedCapsuleAt, plannedMinutes, trials, scrappedCapsules, remarks } = one
  return {
    ...{ id: newId(), siteId, batchId, machineId: idOf(masters.machines, one.machine) },
    fromToolingSetId: one.from === null ? null : idOf(masters.toolingSets, one.from),
    toToolingSetId: idOf(masters.toolingSets, one.to),
    // Signed below: what is signed is the record as it stood before the signature.
    state: 'done' as const,
    cautionsAcceptedAt: startedAt,
    ...{ startedAt, finishedAt, lastGoodCapsuleAt, firstApprovedCapsuleAt, plannedMinutes, trials, scrappedCapsules, remarks },
    doneById: people.find(one.doneBy).id,
    ...{ createdAt: startedAt, updatedAt: finishedAt },
  }
}

/** Stores the changes of tooling, each finished by a fitter and checked under the signature of somebody else. */
export async function storeChangeovers(
  changeovers: readonly ScenarioChangeover[],
  { masters, context, batches }: { masters: DemoMasters; context: DemoContext; batches: readonly StoredBatch[] },
): Promise<void> {
  const { people } = context
  const batchIds = new Map(batches.map(({ batch, id }) => [batch.number, id]))
  const rows = changeovers.map((one) => ({ one, row: changeoverRow(one, masters, context, batchIds.get(one.batch ?? '') ?? null) }))
  await insertAll(
    Changeover,
    rows.map(({ row }) => row),
  )
  await insertAll(
    ChangeoverStep,
    rows.flatMap(({ one, row }) =>
      one.steps.map(({ doneBy, ...step }, place) => ({
        ...step,
        changeoverId: row.id,
        ordinal: place + 1,
        doneById: people.find(doneBy).id,
      })),
    ),
  )
  await insertAll(
    ChangeoverReading,
    rows.flatMap(({ one, row }) =>
      one.readings.map(({ readBy, ...reading }, place) => ({
        ...reading,
        changeoverId: row.id,
        ordinal: place + 1,
        readById: people.find(readBy).id,
      })),
    ),
  )
  await insertAll(
    MachineEvent,
    rows.map(({ row }) => finishedEvent(row)),
  )
  for (const { one, row } of rows) await sign(one, row, context)
}

function finishedEvent({ id: changeoverId, siteId, machineId, batchId, finishedAt, toToolingSetId, doneById }: Row) {
  const at = { happenedAt: finishedAt, recordedAt: finishedAt }
  return {
    siteId,
    machineId,
    batchId,
    kind: 'changeover' as const,
    ...at,
    toolingSetId: toToolingSetId,
    changeoverId,
    recordedById: doneById,
  }
}

async function sign(one: ScenarioChangeover, row: Row, { book, people, siteId }: DemoContext): Promise<void> {
  const changeover = await Changeover.findByPk(row.id, { rejectOnEmpty: true })
  const content = await presentChangeover(changeover)
  const checker = people.find(one.checkedBy)
  const record = { kind: 'changeover', id: row.id }
  const signature = demoSignature(checker, { siteId, meaning: 'changeover checked', record, content, signedAt: one.checkedAt })
  await Signature.create(signature)
  await changeover.update({ state: 'checked', checkedById: checker.id, checkedAt: one.checkedAt, version: changeover.version + 3 })
  const chain = chainOf.changeovers(siteId)
  const doneBy = people.find(one.doneBy)
  const { machineId, fromToolingSetId, toToolingSetId, trials, scrappedCapsules, remarks } = row
  book.note(one.startedAt, doneBy, { chain, action: 'changeover:start', record, new: { machineId, fromToolingSetId, toToolingSetId } })
  for (const [place, { title, doneAt, doneBy: who }] of one.steps.entries()) {
    book.note(doneAt, people.find(who), { chain, action: 'changeover:step', record, new: { ordinal: place + 1, title, doneAt } })
  }
  for (const [place, { readAt, readBy, name, place: where, value, unit }] of one.readings.entries()) {
    book.note(readAt, people.find(readBy), {
      chain,
      action: 'changeover:reading',
      record,
      new: { ordinal: place + 1, name, place: where, value, unit },
    })
  }
  book.note(one.finishedAt, doneBy, { chain, action: 'changeover:finish', record, new: { trials, scrappedCapsules, remarks } })
  book.note(one.checkedAt, checker, { chain, action: 'changeover:check', record, new: { contentHash: signature.contentHash } })
}
