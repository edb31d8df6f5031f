import type { BatchAnswer } from '#shared/schemas/batches.ts'
import type { Batch } from '../../models/batch.ts'
import { ControlPlan } from '../../models/control-plan.ts'
import { Machine } from '../../models/machine.ts'
import { Product } from '../../models/product.ts'
import { ShellLot } from '../../models/shell-lot.ts'
import { ToolingSet } from '../../models/tooling-set.ts'
import { User } from '../../models/user.ts'

/** Capsules an hour: bores of one group at every index. */
export function capsulesPerHour(batch: Pick<Batch, 'indexesPerMinute'>, machine: Pick<Machine, 'boresPerGroup'>): number {
  return batch.indexesPerMinute * machine.boresPerGroup * 60
}

const rejectOnEmpty = { rejectOnEmpty: true } as const

/** A batch with everything it was made with, as clients see it. */
export async function presentBatch(batch: Batch): Promise<BatchAnswer> {
  const machine = await Machine.findByPk(batch.machineId, rejectOnEmpty)
  const product = await Product.findByPk(batch.productId, rejectOnEmpty)
  const toolingSet = await ToolingSet.findByPk(batch.toolingSetId, rejectOnEmpty)
  const shellLot = await ShellLot.findByPk(batch.shellLotId, rejectOnEmpty)
  const plan = await ControlPlan.findByPk(batch.controlPlanId, rejectOnEmpty)
  const approver = batch.startUpApprovedById === null ? null : await User.findByPk(batch.startUpApprovedById)
  return {
    ...pickBatch(batch),
    machine: pickMachine(machine),
    product: pickProduct(product),
    toolingSet: { id: toolingSet.id, code: toolingSet.code },
    shellLot: { id: shellLot.id, code: shellLot.code, tareMeanMg: shellLot.tareMeanMg, tareSdMg: shellLot.tareSdMg, tareN: shellLot.tareN },
    controlPlan: pickPlan(plan),
    capsulesPerHour: capsulesPerHour(batch, machine),
    startUpApprovedBy: approver?.name ?? null,
  }
}

function pickBatch(
  batch: Batch,
): Omit<BatchAnswer, 'machine' | 'product' | 'toolingSet' | 'shellLot' | 'controlPlan' | 'capsulesPerHour' | 'startUpApprovedBy'> {
  const { id, siteId, number, state, blendLot, plannedCapsules, indexesPerMinute, assayPercent, sampleCount, version } = batch
  const { goodCapsules, rejectedCapsules, setUpScrapCapsules } = batch
  return {
    id,
    siteId,
    number,
    state,
    blendLot,
    plannedCapsules,
    indexesPerMinute,
    assayPercent,
    sampleCount,
    version,
    goodCapsules,
    rejectedCapsules,
    setUpScrapCapsules,
    startedAt: batch.startedAt?.toISOString() ?? null,
    endedAt: batch.endedAt?.toISOString() ?? null,
    startUpApprovedAt: batch.startUpApprovedAt?.toISOString() ?? null,
  }
}

function pickMachine({
  id,
  code,
  name,
  boresPerGroup,
  discGroups,
  segments,
  stations,
  scaleMinMm,
  scaleMaxMm,
}: Machine): BatchAnswer['machine'] {
  return { id, code, name, boresPerGroup, discGroups, segments, stations, scaleMinMm, scaleMaxMm }
}

function pickProduct(product: Product): BatchAnswer['product'] {
  const { id, code, name, capsuleSize, targetFillMg, lowerSpecificationMg, upperSpecificationMg, acceptanceStandards, labelClaims } =
    product
  return { id, code, name, capsuleSize, targetFillMg, lowerSpecificationMg, upperSpecificationMg, acceptanceStandards, labelClaims }
}

function pickPlan(plan: ControlPlan): BatchAnswer['controlPlan'] {
  const { id, planVersion, basis, sampleSize, startUpSampleSize, intervalMinutes, chart, runTests, reactionSteps } = plan
  const { meanAlertPercent, meanActionPercent, individualAlertPercent, individualActionPercent, rsdAlertPercent, rsdActionPercent } = plan
  return {
    id,
    planVersion,
    basis,
    sampleSize,
    startUpSampleSize,
    intervalMinutes,
    chart,
    runTests,
    reactionSteps,
    meanAlertPercent,
    meanActionPercent,
    individualAlertPercent,
    individualActionPercent,
    rsdAlertPercent,
    rsdActionPercent,
  }
}
