import type { MachineEventAnswer, RecordEvent } from '#shared/schemas/machine-events.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError, InvalidFieldError } from '../../errors.ts'
import type { Actor } from '../../http/actor.ts'
import type { Batch } from '../../models/batch.ts'
import { Machine } from '../../models/machine.ts'
import { MachineEvent } from '../../models/machine-event.ts'
import { ShellLot } from '../../models/shell-lot.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { findBatch } from '../batches/find-batch.ts'
import { requireBatchState } from '../batches/run-batch.ts'
import { statedTime } from '../stated-time.ts'
import { userNames } from '../user-names.ts'

const UNITS = { penetration: 'mm', 'bed-height': 'mm', 'disc-thickness': 'mm', spring: 'N/mm' } as const

type Adjustment = Extract<RecordEvent, { kind: 'adjustment' }>

/** A penetration is set at one station of this machine, within its scale, and has to move. */
function requirePossibleAdjustment(machine: Machine, { setting, station, valueFrom, valueTo }: Adjustment): void {
  if (valueFrom === valueTo) throw new InvalidFieldError('/valueTo', 'The setting has not moved.')
  if (setting !== 'penetration') return
  if (station === null || station > machine.stations)
    throw new InvalidFieldError('/station', `Name the tamping station, 1 to ${machine.stations}.`)
  for (const [pointer, value] of [
    ['/valueFrom', valueFrom],
    ['/valueTo', valueTo],
  ] as const) {
    if (value < machine.scaleMinMm || value > machine.scaleMaxMm) {
      throw new InvalidFieldError(
        pointer,
        `The scale of machine ${machine.code} reads from ${machine.scaleMinMm} to ${machine.scaleMaxMm} mm; ${value} is off it.`,
      )
    }
  }
}

/** A new shell lot changes the tare from this moment on: the batch carries it from now. */
async function changeShellLot(batch: Batch, shellLotId: string): Promise<string> {
  const lot = await ShellLot.findOne({ where: { id: shellLotId, siteId: batch.siteId, isActive: true } })
  if (!lot) throw new InvalidFieldError('/shellLotId', 'There is no such shell lot in use at this site.')
  if (lot.tareN === 0) throw new ConflictError('no-tare', `Shell lot ${lot.code} has no tare yet; weigh its empty shells first.`)
  if (lot.id === batch.shellLotId) throw new InvalidFieldError('/shellLotId', `The batch runs on shell lot ${lot.code} already.`)
  await batch.update({ shellLotId: lot.id, version: batch.version + 1 })
  return lot.code
}

async function changesOf(batch: Batch, machine: Machine, request: RecordEvent): Promise<Partial<MachineEvent>> {
  switch (request.kind) {
    case 'adjustment':
      requirePossibleAdjustment(machine, request)
      return {
        setting: request.setting,
        station: request.station,
        valueFrom: request.valueFrom,
        valueTo: request.valueTo,
        unit: UNITS[request.setting],
      }
    case 'speed':
      await batch.update({ indexesPerMinute: request.valueTo, version: batch.version + 1 })
      return { valueFrom: request.valueFrom, valueTo: request.valueTo, unit: 'indexes/min' }
    case 'shell-lot':
      return { shellLotId: request.shellLotId, label: await changeShellLot(batch, request.shellLotId) }
    case 'blend-container':
      return { label: request.label }
    default:
      return {}
  }
}

/** Records what happened at the machine during a run, with the person, the time and the reason. */
export async function recordEvent(actor: Actor, batchId: string, request: RecordEvent): Promise<MachineEventAnswer> {
  return inTransaction(async () => {
    const batch = await findBatch(actor, 'event:record', batchId, { isLocked: true })
    requireBatchState(batch, ['running'], 'recording an event')
    const machine = await Machine.findByPk(batch.machineId, { rejectOnEmpty: true })
    const now = new Date()
    const happenedAt = statedTime('/happenedAt', request.happenedAt, now)
    if (batch.startedAt && happenedAt < batch.startedAt) throw new InvalidFieldError('/happenedAt', 'This lies before the run was started.')
    const changes = await changesOf(batch, machine, request)
    const event = await MachineEvent.create({
      siteId: batch.siteId,
      machineId: batch.machineId,
      batchId,
      kind: request.kind,
      happenedAt,
      recordedAt: now,
      reason: request.reason,
      recordedById: actor.userId,
      ...changes,
    })
    await appendAudit({
      actor,
      chain: chainOf.batch(batchId),
      action: `event:${request.kind}`,
      record: { kind: 'machine-event', id: event.id },
      new: request,
      reason: request.reason,
    })
    const [answer] = await presentEvents([event])
    if (!answer) throw new Error('A machine event could not be presented.')
    return answer
  })
}

/** Events as clients see them. */
export async function presentEvents(events: readonly MachineEvent[]): Promise<MachineEventAnswer[]> {
  const names = await userNames(events.map(({ recordedById }) => recordedById))
  return events.map(
    ({ id, batchId, kind, happenedAt, recordedAt, station, setting, valueFrom, valueTo, unit, label, reason, recordedById }) => ({
      id,
      batchId,
      kind,
      happenedAt: happenedAt.toISOString(),
      recordedAt: recordedAt.toISOString(),
      station,
      setting,
      valueFrom,
      valueTo,
      unit,
      label,
      reason,
      recordedBy: names.get(recordedById) ?? '',
    }),
  )
}

/** The events of a run in the order in which they happened. */
export async function listEvents(actor: Actor, batchId: string): Promise<MachineEventAnswer[]> {
  const batch = await findBatch(actor, 'record:read', batchId)
  return presentEvents(
    await MachineEvent.findAll({
      where: { batchId: batch.id },
      order: [
        ['happenedAt', 'ASC'],
        ['id', 'ASC'],
      ],
    }),
  )
}
