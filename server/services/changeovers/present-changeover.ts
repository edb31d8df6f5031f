import type { ChangeoverAnswer, ChangeoverListItem } from '#shared/schemas/changeovers.ts'
import { Batch } from '../../models/batch.ts'
import type { Changeover } from '../../models/changeover.ts'
import { ChangeoverReading } from '../../models/changeover-reading.ts'
import { ChangeoverStep } from '../../models/changeover-step.ts'
import { Machine } from '../../models/machine.ts'
import { ToolingSet } from '../../models/tooling-set.ts'
import { userNames } from '../user-names.ts'

/** From the last good capsule to the first approved one; while those are not stated, from start to finish. */
export function changeoverMinutes({ lastGoodCapsuleAt, firstApprovedCapsuleAt, startedAt, finishedAt }: Changeover): number | null {
  const from = lastGoodCapsuleAt ?? startedAt
  const to = firstApprovedCapsuleAt ?? finishedAt
  return to === null ? null : (to.getTime() - from.getTime()) / 60_000
}

/** Changes of tooling as a list shows them; machines, tooling sets, batches and people are each read once. */
export async function presentChangeovers(changeovers: readonly Changeover[]): Promise<ChangeoverListItem[]> {
  const machines = await codesOf(Machine.findAll({ where: { id: changeovers.map(({ machineId }) => machineId) } }))
  const sets = await codesOf(
    ToolingSet.findAll({
      where: { id: changeovers.flatMap((one) => [one.toToolingSetId, one.fromToolingSetId].filter((id) => id !== null)) },
    }),
  )
  const batches = await Batch.findAll({ where: { id: changeovers.map(({ batchId }) => batchId).filter((id) => id !== null) } })
  const numbers = new Map(batches.map(({ id, number }) => [id, number]))
  const names = await userNames(changeovers.flatMap(({ doneById, checkedById }) => [doneById, checkedById]))
  const reference = (codes: Map<string, string>, id: string): { id: string; code: string } => ({ id, code: codes.get(id) ?? '' })
  return changeovers.map((one) => ({
    id: one.id,
    siteId: one.siteId,
    machine: reference(machines, one.machineId),
    batchId: one.batchId,
    batchNumber: one.batchId === null ? null : (numbers.get(one.batchId) ?? null),
    fromToolingSet: one.fromToolingSetId === null ? null : reference(sets, one.fromToolingSetId),
    toToolingSet: reference(sets, one.toToolingSetId),
    state: one.state,
    ...presentTimes(one),
    plannedMinutes: one.plannedMinutes,
    minutes: changeoverMinutes(one),
    trials: one.trials,
    scrappedCapsules: one.scrappedCapsules,
    remarks: one.remarks,
    doneBy: names.get(one.doneById) ?? '',
    checkedBy: one.checkedById === null ? null : (names.get(one.checkedById) ?? null),
    version: one.version,
  }))
}

async function codesOf(rows: Promise<readonly { id: string; code: string }[]>): Promise<Map<string, string>> {
  return new Map((await rows).map(({ id, code }) => [id, code]))
}

function presentTimes(
  one: Changeover,
): Pick<
  ChangeoverAnswer,
  'cautionsAcceptedAt' | 'startedAt' | 'finishedAt' | 'lastGoodCapsuleAt' | 'firstApprovedCapsuleAt' | 'checkedAt'
> {
  return {
    cautionsAcceptedAt: one.cautionsAcceptedAt.toISOString(),
    startedAt: one.startedAt.toISOString(),
    finishedAt: one.finishedAt?.toISOString() ?? null,
    lastGoodCapsuleAt: one.lastGoodCapsuleAt?.toISOString() ?? null,
    firstApprovedCapsuleAt: one.firstApprovedCapsuleAt?.toISOString() ?? null,
    checkedAt: one.checkedAt?.toISOString() ?? null,
  }
}

const isWithin = ({ value, lowerLimit, upperLimit }: ChangeoverReading): boolean =>
  (lowerLimit === null || value >= lowerLimit) && (upperLimit === null || value <= upperLimit)

/** One change of tooling with its steps and readings. */
export async function presentChangeover(changeover: Changeover): Promise<ChangeoverAnswer> {
  const where = { changeoverId: changeover.id }
  const steps = await ChangeoverStep.findAll({ where, order: [['ordinal', 'ASC']] })
  const readings = await ChangeoverReading.findAll({ where, order: [['ordinal', 'ASC']] })
  const names = await userNames([...steps.map(({ doneById }) => doneById), ...readings.map(({ readById }) => readById)])
  const [item] = await presentChangeovers([changeover])
  if (!item) throw new Error('A changeover could not be presented.')
  return {
    ...item,
    steps: steps.map(({ ordinal, title, isRequired, doneAt, doneById, remark }) => ({
      ordinal,
      title,
      isRequired,
      remark,
      doneAt: doneAt?.toISOString() ?? null,
      doneBy: doneById === null ? null : (names.get(doneById) ?? null),
    })),
    readings: readings.map((reading) => {
      const { ordinal, name, place, value, unit, lowerLimit, upperLimit, manualReference, readAt, readById } = reading
      const limits = { lowerLimit, upperLimit, manualReference, isWithin: isWithin(reading) }
      return { ordinal, name, place, value, unit, ...limits, readAt: readAt.toISOString(), readBy: names.get(readById) ?? '' }
    }),
  }
}
