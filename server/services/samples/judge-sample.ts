import { momentsOf } from '#shared/statistics/summary.ts'
import { judgeByLimits, verdictOf } from '#shared/trade/judge-sample.ts'
import type { SignalSource } from '#shared/vocabulary.ts'
import { raiseSignal } from '../signals/raise-signal.ts'
import { currentWeighings } from './current-weighings.ts'
import { valueOf } from './reading.ts'
import { runTestReasons } from './run-test-reasons.ts'
import type { SampleContext } from './sample-context.ts'

/**
 * Writes the sample's summary and verdict from its capsules as they stand, and raises one signal for everything that it
 * hit. Called when a sample is completed and again when one of its weights is corrected.
 */
export async function judgeSample(context: SampleContext): Promise<void> {
  const { sample, product, plan } = context
  const weighings = await currentWeighings(sample.id)
  const valuesMg = weighings.map((weighing) => valueOf(sample.basis, weighing))
  const { n, mean, sumOfSquares, min, max } = momentsOf(valuesMg)
  const { basis, tareMeanMg } = sample
  const { reasons } = judgeByLimits({ valuesMg, basis, targetFillMg: product.targetFillMg, tareMeanMg, limits: plan })
  const limits: SignalSource[] = reasons.map((reason) => ({ ...reason, sampleIds: [sample.id] }))
  const summary = { n, meanMg: mean, sdMg: n < 2 ? null : Math.sqrt(sumOfSquares / (n - 1)), rangeMg: max - min, minMg: min, maxMg: max }
  // Completed first with the limits alone, since the run tests read the samples of the batch, this one among them.
  await sample.update({ ...summary, state: 'complete', completedAt: sample.completedAt ?? new Date(), verdict: verdictOf(limits) })
  const sources = [...limits, ...(await runTestReasons(context))]
  await sample.update({ verdict: verdictOf(sources), verdictReasons: sources, version: sample.version + 1 })
  if (sources.length > 0) await raiseSignal(context, sources)
}
