import type { CreationAttributes } from 'sequelize'
import type { ScenarioBatch, ScenarioSample } from '#fixtures/scenario/run-records.ts'
import { Batch } from '../../models/batch.ts'
import { MachineEvent } from '../../models/machine-event.ts'
import { newId } from '../../models/new-id.ts'
import { Sample } from '../../models/sample.ts'
import { Weighing } from '../../models/weighing.ts'
import { WeighingCorrection } from '../../models/weighing-correction.ts'
import { noteBatch } from './batch-audit.ts'
import { insertAll } from './insert-all.ts'
import { judgeBatch, type DemoVerdict } from './judge-batch.ts'
import { correctionRows, sampleRow, standingNetMg, weighingRows, type SampleRow } from './sample-rows.ts'
import { idOf, type DemoContext, type DemoMasters } from './store-masters.ts'

/** A batch as stored: its identifiers, its samples in order and what each was judged to be. */
export interface StoredBatch {
  id: string
  batch: ScenarioBatch
  row: ReturnType<typeof batchRow>
  samples: {
    sample: ScenarioSample
    row: SampleRow
    weighings: ReturnType<typeof weighingRows>
    corrections: ReturnType<typeof correctionRows>
    verdict: DemoVerdict | null
  }[]
  events: ReturnType<typeof eventRows>
}

const PLANNED_BEFORE_MS = 3_600_000

function productOf({ product }: ScenarioBatch, masters: DemoMasters) {
  const found = masters.products.get(product)
  if (!found) throw new Error(`The scenario names product ${product}, but holds none.`)
  return found
}

function batchRow(batch: ScenarioBatch, masters: DemoMasters, context: DemoContext) {
  const { number, blendLot, state, plannedCapsules, indexesPerMinute, startedAt, endedAt, assayPercent } = batch
  const product = productOf(batch, masters)
  return {
    id: newId(),
    siteId: context.siteId,
    ...{ number, blendLot, state, plannedCapsules, indexesPerMinute, startedAt, endedAt, assayPercent },
    machineId: idOf(masters.machines, batch.machine),
    ...{ productId: product.id, controlPlanId: product.planId },
    toolingSetId: idOf(masters.toolingSets, batch.toolingSet),
    shellLotId: idOf(masters.shellLots, batch.shellLot),
    startUpApprovedAt: batch.startUpApproved.at,
    startUpApprovedById: context.people.find(batch.startUpApproved.by).id,
    ...{ goodCapsules: batch.goodCapsules, rejectedCapsules: batch.rejectedCapsules, setUpScrapCapsules: batch.setUpScrapCapsules },
    sampleCount: batch.samples.length,
    ...{ createdAt: new Date(startedAt.getTime() - PLANNED_BEFORE_MS), updatedAt: endedAt ?? startedAt },
  }
}

function eventRows(
  batch: ScenarioBatch,
  { id: batchId, machineId }: { id: string; machineId: string },
  masters: DemoMasters,
  context: DemoContext,
) {
  return batch.events.map(({ shellLot, recordedBy, ...event }) => ({
    ...event,
    ...{ id: newId(), siteId: context.siteId, machineId, batchId },
    shellLotId: shellLot === null ? null : idOf(masters.shellLots, shellLot),
    recordedById: context.people.find(recordedBy).id,
    recordedBy,
  }))
}

function prepare(batch: ScenarioBatch, masters: DemoMasters, context: DemoContext): StoredBatch {
  const row = batchRow(batch, masters, context)
  const form = { batchId: row.id, toolingSetId: row.toolingSetId, masters, people: context.people }
  const { product } = productOf(batch, masters)
  const samples = batch.samples.map((sample) => ({ sample, row: sampleRow(sample, form), valuesMg: standingNetMg(sample) }))
  const adjustments = batch.events.flatMap(({ kind, happenedAt }) => (kind === 'adjustment' ? [happenedAt] : []))
  const verdicts = judgeBatch(product, samples, adjustments)
  return {
    ...{ id: row.id, batch, row },
    samples: samples.map(({ sample, row: sampleOf }) => ({
      ...{ sample, row: sampleOf, verdict: verdicts.get(sampleOf.id) ?? null },
      weighings: weighingRows(sample, sampleOf, product.targetFillMg),
      corrections: correctionRows(sample, sampleOf.id, context.people),
    })),
    events: eventRows(batch, row, masters, context),
  }
}

/** Stores batches with their samples, weights, corrections and machine events, each judged as the program judges. */
export async function storeBatches(batches: readonly ScenarioBatch[], masters: DemoMasters, context: DemoContext): Promise<StoredBatch[]> {
  const stored = batches.map((batch) => prepare(batch, masters, context))
  const samples = stored.flatMap((one) => one.samples)
  await insertAll(
    Batch,
    stored.map(({ row }) => row),
  )
  await insertAll(
    Sample,
    samples.map(({ row, verdict }): CreationAttributes<Sample> => ({
      ...row,
      verdict: verdict?.verdict ?? null,
      verdictReasons: verdict?.sources ?? null,
    })),
  )
  await insertAll(
    Weighing,
    samples.flatMap(({ weighings }) => weighings),
  )
  await insertAll(
    WeighingCorrection,
    samples.flatMap(({ corrections }) => corrections),
  )
  await insertAll(
    MachineEvent,
    stored.flatMap(({ events }) => events),
  )
  for (const one of stored) noteBatch(one, context)
  return stored
}
