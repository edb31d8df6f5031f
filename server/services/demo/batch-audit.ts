import { chainOf, type AuditRecord } from '../audit.ts'
import type { StoredBatch } from './store-batches.ts'
import type { DemoContext } from './store-masters.ts'

/** Writes what the services would have written while the batch ran, each step under its own time and person. */
export function noteBatch({ id, batch, row, samples, events }: StoredBatch, { book, people }: DemoContext): void {
  const chain = chainOf.batch(id)
  const record = { kind: 'batch', id }
  const firstOperator = people.find(batch.samples[0]?.weighedBy ?? batch.startUpApproved.by)
  const note = (at: Date, person: string | null, entry: Omit<AuditRecord, 'actor' | 'chain'>): void => {
    book.note(at, person === null ? firstOperator : people.find(person), { chain, ...entry })
  }
  const { number, machineId, productId, controlPlanId, toolingSetId, blendLot, plannedCapsules, indexesPerMinute } = row
  const planned = { number, machineId, productId, controlPlanId, toolingSetId, blendLot, plannedCapsules, indexesPerMinute }
  note(row.createdAt, null, { action: 'batch:plan', record, new: planned })
  note(batch.startedAt, null, { action: 'batch:start', record, old: { state: 'planned' }, new: { state: 'running' } })
  for (const sample of samples) noteSample(note, sample)
  for (const {
    id: eventId,
    kind,
    station,
    setting,
    valueFrom,
    valueTo,
    shellLotId,
    label,
    reason,
    recordedAt,
    recordedBy,
    happenedAt,
  } of events) {
    const now = { kind, happenedAt, station, setting, valueFrom, valueTo, shellLotId, label }
    note(recordedAt, recordedBy, {
      action: `event:${kind}`,
      record: { kind: 'machine-event', id: eventId },
      new: now,
      ...(reason ? { reason } : {}),
    })
  }
  if (!batch.endedAt) return
  const { goodCapsules, rejectedCapsules, setUpScrapCapsules } = batch
  const counts = { goodCapsules, rejectedCapsules, setUpScrapCapsules }
  note(batch.endedAt, null, { action: 'batch:end', record, old: { state: 'running' }, new: { state: 'ended', ...counts } })
}

type Note = (at: Date, person: string | null, entry: Omit<AuditRecord, 'actor' | 'chain'>) => void

function noteSample(note: Note, { sample, row, weighings, corrections, verdict }: StoredBatch['samples'][number]): void {
  const record = { kind: 'sample', id: row.id }
  const weighingOf = (ordinal: number) => ({ kind: 'weighing', id: `${row.id}/${ordinal}` })
  const { sequence, kind, plannedN, balanceId, firstSegment, dueAt, entry, n, meanMg, sdMg } = row
  note(sample.startedAt, sample.weighedBy, {
    action: 'sample:open',
    record,
    new: { kind, plannedN, balanceId, firstSegment, dueAt, entry, sequence },
  })
  for (const { ordinal, grossMg, shellMg, netMg, isQuestioned, weighedAt } of weighings) {
    note(weighedAt, sample.weighedBy, {
      action: 'weight:keep',
      record: weighingOf(ordinal),
      new: { grossMg, shellMg, netMg, isQuestioned },
    })
  }
  if (sample.completedAt) {
    note(sample.completedAt, sample.weighedBy, {
      action: 'sample:complete',
      record,
      new: { n, meanMg, sdMg, verdict: verdict?.verdict ?? null },
    })
  }
  for (const [place, { ordinal, position, grossMg, shellMg, netMg, reason, correctedAt }] of corrections.entries()) {
    const first = weighings[ordinal - 1]
    const old = { grossMg: first?.grossMg, shellMg: first?.shellMg, netMg: first?.netMg, position: first?.position }
    const by = sample.corrections[place]?.correctedBy ?? sample.weighedBy
    note(correctedAt, by, {
      action: 'weight:correct',
      record: weighingOf(ordinal),
      old,
      new: { grossMg, shellMg, netMg, position },
      reason,
    })
  }
  const last = sample.weighings.at(-1)?.weighedAt ?? sample.startedAt
  if (sample.abandonedReason !== null) {
    note(last, sample.weighedBy, { action: 'sample:abandon', record, new: { n }, reason: sample.abandonedReason })
  }
  if (sample.excluded) {
    note(sample.completedAt ?? last, sample.excluded.by, { action: 'sample:exclude', record, reason: sample.excluded.reason })
  }
}
