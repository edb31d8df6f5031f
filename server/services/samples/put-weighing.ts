import { UniqueConstraintError } from 'sequelize'
import type { PutWeighing, WeighingKept } from '#shared/schemas/samples.ts'
import { momentsOf } from '#shared/statistics/summary.ts'
import { judgeByLimits } from '#shared/trade/judge-sample.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError } from '../../errors.ts'
import type { Actor } from '../../http/actor.ts'
import { Weighing } from '../../models/weighing.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { currentWeighings, type CurrentWeighing } from './current-weighings.ts'
import { presentWeighing } from './present-sample.ts'
import { placeOf, readingOf, requirePlausible, valueOf, type Reading } from './reading.ts'
import { findSample, requireIncomplete, type SampleContext } from './sample-context.ts'

const SAME_MG = 0.0005

const isSame = (a: number | null, b: number | null): boolean => (a === null || b === null ? a === b : Math.abs(a - b) < SAME_MG)

/** The same weight sent again is the same deed; another one for a capsule that is weighed already is a conflict. */
function requireSameReading(taken: CurrentWeighing, reading: Reading, ordinal: number): void {
  if (isSame(taken.first.grossMg, reading.grossMg) && isSame(taken.first.netMg, reading.netMg)) return
  throw new ConflictError(
    'capsule-weighed',
    `Capsule ${ordinal} is weighed already, with another weight. Correct it with a reason if it is wrong.`,
    {
      kept: { grossMg: taken.first.grossMg, netMg: taken.first.netMg },
      sent: reading,
    },
  )
}

function requireNext(ordinal: number, count: number, { sample }: SampleContext): void {
  if (ordinal > sample.plannedN)
    throw new ConflictError('sample-full', `Sample ${sample.sequence} takes ${sample.plannedN} capsules.`, { plannedN: sample.plannedN })
  if (ordinal !== count + 1)
    throw new ConflictError('capsule-out-of-order', `Capsule ${count + 1} comes next, not ${ordinal}.`, { next: count + 1 })
}

function kept(context: SampleContext, weighings: readonly CurrentWeighing[], ordinal: number): WeighingKept {
  const { sample, product, plan } = context
  const valuesMg = weighings.map((weighing) => valueOf(sample.basis, weighing))
  const { n, mean, sumOfSquares, min, max } = momentsOf(valuesMg)
  const { basis, tareMeanMg } = sample
  const judgement = judgeByLimits({ valuesMg, basis, targetFillMg: product.targetFillMg, tareMeanMg, limits: plan })
  const weighing = weighings[ordinal - 1]
  if (!weighing) throw new Error(`Capsule ${ordinal} was stored but cannot be read.`)
  return {
    weighing: presentWeighing(weighing, new Map()),
    n,
    meanMg: mean,
    sdMg: n < 2 ? null : Math.sqrt(sumOfSquares / (n - 1)),
    rangeMg: max - min,
    minMg: min,
    maxMg: max,
    ...judgement,
  }
}

async function store(actor: Actor, sampleId: string, ordinal: number, request: PutWeighing): Promise<WeighingKept> {
  return inTransaction(async () => {
    const context = await findSample(actor, 'sample:record', sampleId, { isLocked: true })
    const weighings = await currentWeighings(sampleId)
    const reading = readingOf(context, request)
    const taken = weighings[ordinal - 1]
    if (taken) {
      requireSameReading(taken, reading, ordinal)
      return kept(context, weighings, ordinal)
    }
    requireIncomplete(context.sample)
    requireNext(ordinal, weighings.length, context)
    const isQuestioned = requirePlausible(context, valueOf(context.sample.basis, reading), request.isConfirmed)
    const first = await Weighing.create({
      sampleId,
      ordinal,
      ...placeOf(context, ordinal, request),
      ...reading,
      shownDecimals: request.shownDecimals,
      isQuestioned,
      entry: request.entry,
      weighedById: actor.userId,
      weighedAt: new Date(),
      deviceTime: request.deviceTime === null ? null : new Date(request.deviceTime),
    })
    await appendAudit({
      actor,
      chain: chainOf.batch(context.batch.id),
      action: 'weight:keep',
      record: { kind: 'weighing', id: `${sampleId}/${ordinal}` },
      new: { ...reading, isQuestioned },
    })
    return kept(context, [...weighings, { first, corrections: [], ...reading, position: first.position }], ordinal)
  })
}

/**
 * Stores one weight for good: when this answers, the weight is on disk with its own time and audit entry. Sending the
 * same weight again answers the same; the sample's row lock and the primary key let no capsule be weighed twice.
 */
export async function putWeighing(actor: Actor, sampleId: string, ordinal: number, request: PutWeighing): Promise<WeighingKept> {
  try {
    return await store(actor, sampleId, ordinal, request)
  } catch (error) {
    if (!(error instanceof UniqueConstraintError)) throw error
    return store(actor, sampleId, ordinal, request)
  }
}
