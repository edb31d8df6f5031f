import { createHash } from 'node:crypto'
import type { BalanceFileMapping } from '#shared/schemas/balance-files.ts'
import type { PublishWeighingFile, WeighingFileAnswer } from '#shared/schemas/weighing-files.ts'
import { BalanceFileProblems } from '../../balance-files/problems.ts'
import { readBalanceFile, type BalanceFileReport } from '../../balance-files/read.ts'
import type { WeighingRow } from '../../balance-files/row.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { BalanceFileRefusedError, ConflictError, InvalidFieldError } from '../../errors.ts'
import type { Actor } from '../../http/actor.ts'
import { Balance } from '../../models/balance.ts'
import type { Batch } from '../../models/batch.ts'
import { ControlPlan } from '../../models/control-plan.ts'
import { Machine } from '../../models/machine.ts'
import { newId } from '../../models/new-id.ts'
import { Sample } from '../../models/sample.ts'
import { Weighing } from '../../models/weighing.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { findBatch } from '../batches/find-batch.ts'
import { requireBatchState } from '../batches/run-batch.ts'
import { canonicalJson } from '../canonical-json.ts'
import { publishEvent } from '../live-events.ts'
import { judgeSample } from '../samples/judge-sample.ts'
import { capsulesMadeAt, frozenTare, requireUsableBalance } from '../samples/open-sample.ts'
import { contextOf } from '../samples/sample-context.ts'
import { readBytes } from './stored-bytes.ts'
import { findFile, presentFile, refuseSecondTime } from './upload-file.ts'

interface FileSample {
  rows: WeighingRow[]
}

interface ReadFile {
  samples: FileSample[]
  report: BalanceFileReport
}

/** Reads the stored bytes by the mapping; the first problem refuses the whole file. */
async function readWhole(
  fileId: string,
  mapping: BalanceFileMapping,
  limits: { positions: number; segments: number; readabilityMg: number },
): Promise<ReadFile> {
  const samples: FileSample[] = []
  const reading = readBalanceFile(readBytes(fileId), mapping, { now: new Date(), ...limits })
  try {
    for (;;) {
      const step = await reading.next()
      if (step.done) return { samples, report: step.value }
      for (const row of step.value) (samples[row.sampleIndex] ??= { rows: [] }).rows.push(row)
    }
  } catch (error) {
    if (error instanceof BalanceFileProblems) throw new BalanceFileRefusedError(error)
    throw error
  }
}

interface Stored {
  actor: Actor
  batch: Batch
  machine: Machine
  plan: ControlPlan
  fileId: string
  kind: PublishWeighingFile['kind']
  balanceId: string
  checkId: string | null
}

/** A weight of a file on the basis of the plan: what the file does not say is never assumed. */
function quantities(row: WeighingRow, { plan }: Stored, tareMeanMg: number | null): { grossMg: number | null; netMg: number | null } {
  if (plan.basis === 'net-individual' || row.mark === 'net') {
    if (plan.basis === 'gross')
      throw new InvalidFieldError('/mapping', `Line ${row.line} is marked net; the plan of this batch wants gross weights.`)
    return { grossMg: null, netMg: row.weightMg }
  }
  if (plan.basis === 'gross' || tareMeanMg === null) return { grossMg: row.weightMg, netMg: null }
  const netMg = row.weightMg - tareMeanMg
  if (netMg <= 0)
    throw new InvalidFieldError(
      '/mapping',
      `Line ${row.line}: ${row.weightMg} mg is no more than an empty shell (${tareMeanMg.toFixed(1)} mg).`,
    )
  return { grossMg: row.weightMg, netMg }
}

async function storeSample(stored: Stored, { rows }: FileSample): Promise<void> {
  const { actor, batch, machine, plan, fileId, kind, balanceId, checkId } = stored
  const now = new Date()
  const tare = await frozenTare(batch, plan.basis)
  const startedAt = rows[0]?.weighedAt ?? now
  const id = newId()
  const sample = await Sample.create({
    id,
    batchId: batch.id,
    sequence: batch.sampleCount + 1,
    kind,
    basis: plan.basis,
    plannedN: rows.length,
    toolingSetId: batch.toolingSetId,
    shellLotId: batch.shellLotId,
    ...tare,
    balanceId,
    balanceCheckId: checkId,
    weighingFileId: fileId,
    startedAt,
    capsulesMade: await capsulesMadeAt(batch, machine, startedAt),
    weighedById: actor.userId,
    entry: 'file',
  })
  const weighings = rows.map((row, place) => ({
    sampleId: id,
    ordinal: place + 1,
    position: row.position ?? (place % machine.boresPerGroup) + 1,
    segment: row.segment,
    ...quantities(row, stored, tare.tareMeanMg),
    shownDecimals: row.decimalsMg,
    entry: 'file' as const,
    weighedById: actor.userId,
    weighedAt: now,
    deviceTime: row.weighedAt,
  }))
  await Weighing.bulkCreate(weighings)
  await batch.update({ sampleCount: sample.sequence })
  await judgeSample(await contextOf(sample, batch))
  // One entry a sample: the hash over its weights says as much as one entry each, and the original bytes are kept beside it.
  const weightsHash = createHash('sha256').update(canonicalJson(weighings)).digest('hex')
  await appendAudit({
    actor,
    chain: chainOf.batch(batch.id),
    action: 'sample:import',
    record: { kind: 'sample', id },
    new: { sequence: sample.sequence, n: rows.length, weightsHash, weighingFileId: fileId },
  })
}

/**
 * Takes the weights of an uploaded file: all of it or nothing. The mapping was confirmed by a person and is remembered
 * for the balance; the same bytes are never taken twice at a site.
 */
export async function publishFile(actor: Actor, fileId: string, { mapping, kind }: PublishWeighingFile): Promise<WeighingFileAnswer> {
  const found = await findFile(actor, 'weighing-file:import', fileId)
  return inTransaction(async () => {
    const batch = await findBatch(actor, 'weighing-file:import', found.batchId, { isLocked: true })
    requireBatchState(batch, ['running', 'ended'], 'taking a balance file')
    const file = await found.reload({ lock: true })
    if (file.state === 'published')
      throw new ConflictError('file-already-published', 'This file is taken already.', { weighingFileId: file.id, batchId: file.batchId })
    await refuseSecondTime(file.siteId, file.sha256)
    const machine = await Machine.findByPk(batch.machineId, { rejectOnEmpty: true })
    const plan = await ControlPlan.findByPk(batch.controlPlanId, { rejectOnEmpty: true })
    const { balance, check } = await requireUsableBalance(batch.siteId, file.balanceId, new Date())
    const { samples, report } = await readWhole(fileId, mapping, {
      positions: machine.boresPerGroup,
      segments: machine.segments,
      readabilityMg: balance.readabilityMg,
    })
    const stored: Stored = { actor, batch, machine, plan, fileId, kind, balanceId: balance.id, checkId: check?.id ?? null }
    for (const sample of samples) await storeSample(stored, sample)
    const { rows, encoding, notes, noteTotal } = report
    const summary = { rows, samples: samples.length, encoding, notes, noteTotal }
    await file.update({ state: 'published', publishedSha256: file.sha256, publishedAt: new Date(), mapping, report: summary })
    await Balance.update({ fileMapping: mapping }, { where: { id: balance.id } })
    await appendAudit({
      actor,
      chain: chainOf.batch(batch.id),
      action: 'weighing-file:publish',
      record: { kind: 'weighing-file', id: fileId },
      new: { rows, samples: samples.length, sha256: file.sha256, mapping },
    })
    await publishEvent({ siteId: batch.siteId, kind: 'weighing-file', subjectId: fileId, batchId: batch.id })
    return presentFile(file)
  })
}
