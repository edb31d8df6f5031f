import type { BatchAnswer } from '#shared/schemas/batches.ts'
import { Balance } from '../../models/balance.ts'
import type { Batch } from '../../models/batch.ts'
import { Changeover } from '../../models/changeover.ts'
import { Deviation } from '../../models/deviation.ts'
import { MachineEvent } from '../../models/machine-event.ts'
import { Product } from '../../models/product.ts'
import { Sample } from '../../models/sample.ts'
import { Signal } from '../../models/signal.ts'
import { presentBatch } from '../batches/present-batch.ts'
import { presentChangeover } from '../changeovers/present-changeover.ts'
import { presentEvents } from '../machine-events/record-event.ts'
import { presentSignals } from '../signals/answer-signal.ts'
import { judgeAcceptance } from './batch-acceptance.ts'
import { presentDeviation } from './deviations.ts'
import { recordedSamples } from './recorded-samples.ts'

export type BatchRecord = Awaited<ReturnType<typeof readBatchRecord>>

/**
 * Everything that belongs to the weight-check part of a batch record, in one plain object: what is shown, what is hashed,
 * what is signed, printed and exported are the same thing.
 */
export async function readBatchRecord(batch: Batch) {
  const product = await Product.findByPk(batch.productId, { rejectOnEmpty: true })
  const samples = await recordedSamples(batch.id)
  const events = await MachineEvent.findAll({
    where: { batchId: batch.id },
    order: [
      ['happenedAt', 'ASC'],
      ['id', 'ASC'],
    ],
  })
  const changeovers = await Changeover.findAll({ where: { batchId: batch.id }, order: [['startedAt', 'ASC']] })
  const signals = await Signal.findAll({ where: { batchId: batch.id }, order: [['raisedAt', 'ASC']] })
  const deviations = await Deviation.findAll({ where: { batchId: batch.id }, order: [['openedAt', 'ASC']] })
  const balanceIds = await Sample.findAll({ where: { batchId: batch.id }, attributes: ['balanceId'], group: ['balanceId'] })
  const balances = await Balance.findAll({ where: { id: balanceIds.map(({ balanceId }) => balanceId).filter((id) => id !== null) } })
  // The batch's own version and state move with each decision; the record is what the decision was taken on.
  const made = withoutMovingFields(await presentBatch(batch))
  return {
    format: 'scruple-batch-record/1',
    batch: made,
    balances: balances.map(({ code, readabilityMg, repeatabilitySdMg, calibrationDueOn }) => ({
      code,
      readabilityMg,
      repeatabilitySdMg,
      calibrationDueOn,
    })),
    samples,
    events: await presentEvents(events),
    changeovers: await Promise.all(changeovers.map(presentChangeover)),
    signals: await presentSignals(signals),
    deviations: await Promise.all(deviations.map(presentDeviation)),
    acceptance: judgeAcceptance(batch, product, samples),
  }
}

function withoutMovingFields(batch: BatchAnswer): Omit<BatchAnswer, 'version' | 'state'> {
  const copy: Partial<BatchAnswer> & Omit<BatchAnswer, 'version' | 'state'> = { ...batch }
  delete copy.version
  delete copy.state
  return copy
}
