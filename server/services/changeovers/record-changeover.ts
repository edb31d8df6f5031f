import type {
  ChangeoverAnswer,
  ChangeoverReading as ReadingRequest,
  CheckChangeover,
  FinishChangeover,
  StartChangeover,
  UpdateStep,
} from '#shared/schemas/changeovers.ts'
import type { Permission } from '#shared/permissions.ts'
import type { ChangeoverState } from '#shared/vocabulary.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError, InvalidFieldError, NotFoundError } from '../../errors.ts'
import { requirePermission, type Actor } from '../../http/actor.ts'
import type { Client } from '../../http/client.ts'
import { Batch } from '../../models/batch.ts'
import { Changeover } from '../../models/changeover.ts'
import { ChangeoverReading } from '../../models/changeover-reading.ts'
import { ChangeoverStep } from '../../models/changeover-step.ts'
import { Machine } from '../../models/machine.ts'
import { MachineEvent } from '../../models/machine-event.ts'
import { ToolingSet } from '../../models/tooling-set.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { requireVersion } from '../require-version.ts'
import { signRecord } from '../signatures.ts'
import { statedTime } from '../stated-time.ts'
import { presentChangeover } from './present-changeover.ts'

/** The changeover, if the actor may do this at its site; locked while it changes. */
export async function findChangeover(actor: Actor, permission: Permission, id: string, { isLocked = false } = {}): Promise<Changeover> {
  const changeover = await Changeover.findByPk(id, isLocked ? { lock: true } : {})
  if (!changeover) throw new NotFoundError('changeover', id)
  requirePermission(actor, permission, { siteId: changeover.siteId, kind: 'changeover', id })
  return changeover
}

function requireState(changeover: Changeover, state: ChangeoverState, step: string): void {
  if (changeover.state === state) return
  throw new ConflictError(`changeover-not-${state}`, `This changeover is ${changeover.state}; ${step} needs it to be ${state}.`, {
    state: changeover.state,
  })
}

async function requireSiteTooling(siteId: string, pointer: string, id: string | null): Promise<void> {
  if (id !== null && !(await ToolingSet.findOne({ where: { id, siteId } })))
    throw new InvalidFieldError(pointer, 'There is no such tooling set at this site.')
}

/** Begins a change of tooling: the cautions are confirmed by the person who does the work, the steps are the site's own. */
export async function startChangeover(actor: Actor, request: StartChangeover): Promise<ChangeoverAnswer> {
  const machine = await Machine.findByPk(request.machineId)
  if (!machine) throw new NotFoundError('machine', request.machineId)
  const { siteId } = machine
  requirePermission(actor, 'changeover:record', { siteId, kind: 'machine', id: machine.id })
  await requireSiteTooling(siteId, '/toToolingSetId', request.toToolingSetId)
  await requireSiteTooling(siteId, '/fromToolingSetId', request.fromToolingSetId)
  if (request.toToolingSetId === request.fromToolingSetId)
    throw new InvalidFieldError('/toToolingSetId', 'The tooling fitted is the tooling taken off.')
  if (request.batchId !== null && !(await Batch.findOne({ where: { id: request.batchId, machineId: machine.id } }))) {
    throw new InvalidFieldError('/batchId', 'There is no such batch on this machine.')
  }
  const now = new Date()
  const lastGoodCapsuleAt = request.lastGoodCapsuleAt === null ? null : statedTime('/lastGoodCapsuleAt', request.lastGoodCapsuleAt, now)
  return inTransaction(async () => {
    const { machineId, batchId, fromToolingSetId, toToolingSetId, plannedMinutes, steps } = request
    const times = { cautionsAcceptedAt: now, startedAt: now, lastGoodCapsuleAt }
    const changeover = await Changeover.create({
      siteId,
      machineId,
      batchId,
      fromToolingSetId,
      toToolingSetId,
      plannedMinutes,
      ...times,
      doneById: actor.userId,
    })
    await ChangeoverStep.bulkCreate(steps.map((title, place) => ({ changeoverId: changeover.id, ordinal: place + 1, title })))
    await appendAudit({
      actor,
      chain: chainOf.changeovers(siteId),
      action: 'changeover:start',
      record: { kind: 'changeover', id: changeover.id },
      new: request,
    })
    return presentChangeover(changeover)
  })
}

/** Marks a step as done by the caller, or takes that back. */
export async function updateStep(actor: Actor, id: string, ordinal: number, { isDone, remark }: UpdateStep): Promise<ChangeoverAnswer> {
  return inTransaction(async () => {
    const changeover = await findChangeover(actor, 'changeover:record', id, { isLocked: true })
    requireState(changeover, 'in-progress', 'working on its steps')
    const step = await ChangeoverStep.findOne({ where: { changeoverId: id, ordinal } })
    if (!step) throw new NotFoundError('step', String(ordinal))
    const old = { doneAt: step.doneAt, doneById: step.doneById, remark: step.remark }
    const next = { doneAt: isDone ? new Date() : null, doneById: isDone ? actor.userId : null, remark }
    await step.update(next)
    await appendAudit({
      actor,
      chain: chainOf.changeovers(changeover.siteId),
      action: 'changeover:step',
      record: { kind: 'changeover', id },
      old: { ordinal, ...old },
      new: { ordinal, ...next },
    })
    return presentChangeover(changeover)
  })
}

/** Adds a reading with the limits that the manual gives. */
export async function addReading(actor: Actor, id: string, reading: ReadingRequest): Promise<ChangeoverAnswer> {
  return inTransaction(async () => {
    const changeover = await findChangeover(actor, 'changeover:record', id, { isLocked: true })
    requireState(changeover, 'in-progress', 'adding a reading')
    const ordinal = 1 + (await ChangeoverReading.count({ where: { changeoverId: id } }))
    await ChangeoverReading.create({ ...reading, changeoverId: id, ordinal, readAt: new Date(), readById: actor.userId })
    await appendAudit({
      actor,
      chain: chainOf.changeovers(changeover.siteId),
      action: 'changeover:reading',
      record: { kind: 'changeover', id },
      new: { ordinal, ...reading },
    })
    return presentChangeover(changeover)
  })
}

async function requireStepsDone(id: string): Promise<void> {
  const open = await ChangeoverStep.findAll({ where: { changeoverId: id, isRequired: true, doneAt: null }, order: [['ordinal', 'ASC']] })
  if (open.length === 0) return
  throw new ConflictError('steps-open', `Steps still open: ${open.map(({ ordinal, title }) => `${ordinal} ${title}`).join('; ')}.`, {
    steps: open.map(({ ordinal }) => ordinal),
  })
}

/** Ends the work: every required step is done. The chart gets its mark at this moment, and the batch its new tooling. */
export async function finishChangeover(actor: Actor, id: string, { version, ...request }: FinishChangeover): Promise<ChangeoverAnswer> {
  return inTransaction(async () => {
    const changeover = await findChangeover(actor, 'changeover:record', id, { isLocked: true })
    requireVersion('changeover', changeover, version)
    requireState(changeover, 'in-progress', 'finishing it')
    await requireStepsDone(id)
    const now = new Date()
    const firstApprovedCapsuleAt =
      request.firstApprovedCapsuleAt === null ? null : statedTime('/firstApprovedCapsuleAt', request.firstApprovedCapsuleAt, now)
    const { siteId, machineId, batchId, toToolingSetId } = changeover
    await changeover.update({ ...request, firstApprovedCapsuleAt, state: 'done', finishedAt: now, version: version + 1 })
    await MachineEvent.create({
      siteId,
      machineId,
      batchId,
      kind: 'changeover',
      happenedAt: now,
      recordedAt: now,
      toolingSetId: toToolingSetId,
      changeoverId: id,
      recordedById: actor.userId,
    })
    if (batchId !== null) await Batch.update({ toolingSetId: toToolingSetId }, { where: { id: batchId, state: ['planned', 'running'] } })
    await appendAudit({
      actor,
      chain: chainOf.changeovers(siteId),
      action: 'changeover:finish',
      record: { kind: 'changeover', id },
      new: request,
    })
    return presentChangeover(changeover)
  })
}

/** A second person signs that the change was checked; the one who did it cannot. */
export async function checkChangeover(
  actor: Actor,
  id: string,
  { version, password }: CheckChangeover,
  client: Client,
): Promise<ChangeoverAnswer> {
  return inTransaction(async () => {
    const changeover = await findChangeover(actor, 'changeover:check', id, { isLocked: true })
    requireVersion('changeover', changeover, version)
    requireState(changeover, 'done', 'checking it')
    const workers = await ChangeoverStep.findAll({ where: { changeoverId: id, doneById: actor.userId } })
    if (changeover.doneById === actor.userId || workers.length > 0) {
      throw new ConflictError('same-person', 'The person who did the work cannot check it; somebody else has to.')
    }
    const content = await presentChangeover(changeover)
    const signature = await signRecord(actor, {
      siteId: changeover.siteId,
      meaning: 'changeover checked',
      record: { kind: 'changeover', id },
      content,
      password,
      client,
    })
    await changeover.update({ state: 'checked', checkedById: actor.userId, checkedAt: signature.signedAt, version: version + 1 })
    await appendAudit({
      actor,
      chain: chainOf.changeovers(changeover.siteId),
      action: 'changeover:check',
      record: { kind: 'changeover', id },
      new: { contentHash: signature.contentHash },
    })
    return presentChangeover(changeover)
  })
}

/** Changes of tooling of the actor's sites, newest first. */
export async function listChangeovers(
  siteIds: readonly string[],
  where: { machineId?: string | undefined; state?: ChangeoverState | undefined },
  limit: number,
): Promise<Changeover[]> {
  const { machineId, state } = where
  return Changeover.findAll({
    where: { siteId: [...siteIds], ...(machineId === undefined ? {} : { machineId }), ...(state === undefined ? {} : { state }) },
    order: [['startedAt', 'DESC']],
    limit,
  })
}
