import type { OpenSample, SampleAnswer } from '#shared/schemas/samples.ts'
import { capsulesMade } from '#shared/trade/capsules-made.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError, InvalidFieldError } from '../../errors.ts'
import type { Actor } from '../../http/actor.ts'
import { Balance } from '../../models/balance.ts'
import { BalanceCheck } from '../../models/balance-check.ts'
import type { Batch } from '../../models/batch.ts'
import { ControlPlan } from '../../models/control-plan.ts'
import { Machine } from '../../models/machine.ts'
import { MachineEvent } from '../../models/machine-event.ts'
import { Sample } from '../../models/sample.ts'
import { ShellLot } from '../../models/shell-lot.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { findBatch } from '../batches/find-batch.ts'
import { requireBatchState } from '../batches/run-batch.ts'
import { contextOf } from './sample-context.ts'
import { presentSample } from './present-sample.ts'

/** A balance that may be weighed on: of the site, in use, its calibration not over; with the check that it relies on. */
export async function requireUsableBalance(
  siteId: string,
  balanceId: string,
  now: Date,
): Promise<{ balance: Balance; check: BalanceCheck | null }> {
  const balance = await Balance.findOne({ where: { id: balanceId, siteId } })
  if (!balance) throw new InvalidFieldError('/balanceId', 'There is no such balance at this site.')
  if (balance.state !== 'in-use') throw new ConflictError('balance-out-of-use', `Balance ${balance.code} is out of use; take another one.`)
  if (balance.calibrationDueOn < now.toISOString().slice(0, 10)) {
    throw new ConflictError(
      'calibration-overdue',
      `The calibration of balance ${balance.code} ended on ${balance.calibrationDueOn}; take another one.`,
    )
  }
  const check = await BalanceCheck.findOne({ where: { balanceId, hasPassed: true }, order: [['checkedAt', 'DESC']] })
  return { balance, check }
}

/** Capsules that the run has made up to a moment, from its start, stops and speeds. */
export async function capsulesMadeAt(batch: Batch, machine: Machine, at: Date): Promise<number | null> {
  if (!batch.startedAt) return null
  const events = await MachineEvent.findAll({
    where: { batchId: batch.id, kind: ['start', 'stop', 'speed'] },
    order: [['happenedAt', 'ASC']],
  })
  const firstSpeed = events.find(({ kind }) => kind === 'speed')?.valueFrom ?? batch.indexesPerMinute
  const run = { startedAtMs: batch.startedAt.getTime(), indexesPerMinute: firstSpeed, boresPerGroup: machine.boresPerGroup }
  return capsulesMade(
    run,
    events.map(({ kind, happenedAt, valueTo }) => ({ kind, atMs: happenedAt.getTime(), speed: valueTo })),
    at.getTime(),
  )
}

/** The tare of the lot that the batch runs on, frozen with the sample; net by mean tare needs one. */
export async function frozenTare(batch: Batch, basis: string): Promise<Pick<Sample, 'tareMeanMg' | 'tareSdMg' | 'tareN'>> {
  const lot = await ShellLot.findByPk(batch.shellLotId, { rejectOnEmpty: true })
  if (basis === 'net-mean-tare' && lot.tareMeanMg === null) {
    throw new ConflictError('no-tare', `Shell lot ${lot.code} has no tare yet; weigh its empty shells first.`)
  }
  return { tareMeanMg: lot.tareMeanMg, tareSdMg: lot.tareSdMg, tareN: lot.tareN }
}

/** Begins a sample: from now on each of its weights is stored as soon as it is sent. */
export async function openSample(actor: Actor, batchId: string, request: OpenSample): Promise<SampleAnswer> {
  return inTransaction(async () => {
    const batch = await findBatch(actor, 'sample:record', batchId, { isLocked: true })
    requireBatchState(batch, ['running'], 'weighing')
    if (request.kind !== 'start-up' && !batch.startUpApprovedAt) {
      throw new ConflictError(
        'start-up-open',
        `The start-up of batch ${batch.number} is not approved yet; weigh start-up samples until it is.`,
      )
    }
    const open = await Sample.findOne({ where: { batchId, state: 'incomplete' } })
    if (open)
      throw new ConflictError('sample-open', `Sample ${open.sequence} is unfinished: go on with it or abandon it.`, { sampleId: open.id })
    const now = new Date()
    const machine = await Machine.findByPk(batch.machineId, { rejectOnEmpty: true })
    const plan = await ControlPlan.findByPk(batch.controlPlanId, { rejectOnEmpty: true })
    const { balance, check } = await requireUsableBalance(batch.siteId, request.balanceId, now)
    if (request.firstSegment !== null && request.firstSegment > machine.segments) {
      throw new InvalidFieldError('/firstSegment', `Machine ${machine.code} has segments 1 to ${machine.segments}.`)
    }
    const sample = await Sample.create({
      batchId,
      sequence: batch.sampleCount + 1,
      kind: request.kind,
      basis: plan.basis,
      plannedN: request.plannedN ?? (request.kind === 'start-up' ? plan.startUpSampleSize : plan.sampleSize),
      toolingSetId: batch.toolingSetId,
      shellLotId: batch.shellLotId,
      ...(await frozenTare(batch, plan.basis)),
      balanceId: balance.id,
      balanceCheckId: check?.id ?? null,
      firstSegment: request.firstSegment,
      dueAt: request.dueAt === null ? null : new Date(request.dueAt),
      startedAt: now,
      capsulesMade: await capsulesMadeAt(batch, machine, now),
      weighedById: actor.userId,
      entry: request.entry,
    })
    await batch.update({ sampleCount: sample.sequence })
    await appendAudit({
      actor,
      chain: chainOf.batch(batchId),
      action: 'sample:open',
      record: { kind: 'sample', id: sample.id },
      new: { ...request, sequence: sample.sequence },
    })
    return presentSample(await contextOf(sample, batch))
  })
}
