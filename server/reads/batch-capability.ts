import type { BatchCapability, BatchPositions } from '#shared/schemas/batch-chart.ts'
import { analysisOfMeans } from '#shared/statistics/analysis-of-means.ts'
import { capability } from '#shared/statistics/capability.ts'
import { medianOf } from '#shared/statistics/selection.ts'
import { ConflictError } from '../errors.ts'
import type { Actor } from '../http/actor.ts'
import { readBatchChart } from './batch-chart.ts'
import { batchWeights, type SampleWeights } from './batch-weights.ts'

const FEWEST_WEIGHTS = 20
const BINS = 24

function histogramOf(values: readonly number[]): BatchCapability['histogram'] {
  const min = Math.min(...values)
  const width = (Math.max(...values) - min) / BINS || 1
  const counts = new Array<number>(BINS).fill(0)
  for (const value of values) {
    const bin = Math.min(BINS - 1, Math.floor((value - min) / width))
    counts[bin] = (counts[bin] ?? 0) + 1
  }
  return counts.map((count, bin) => ({ fromMg: min + bin * width, toMg: min + (bin + 1) * width, count }))
}

/** Capability from every weight of a batch, and in one sentence whether its chart was calm enough for that to mean anything. */
export async function readBatchCapability(actor: Actor, batchId: string): Promise<BatchCapability> {
  const chart = await readBatchChart(actor, batchId, {})
  const samples = await batchWeights(batchId)
  const values = samples.flatMap(({ valuesMg }) => valuesMg)
  if (values.length < FEWEST_WEIGHTS) {
    throw new ConflictError('too-few-weights', `Capability needs ${FEWEST_WEIGHTS} weights or more; this batch has ${values.length}.`, {
      n: values.length,
    })
  }
  const [lower, upper] = chart.specificationMg
  const figures = capability({ subgroups: samples.map(({ valuesMg }) => valuesMg), lower, upper, target: chart.targetMg })
  const signals = new Set(chart.signals.map(({ point }) => point)).size
  const shifts = chart.phases.length - 1
  const isStable = signals === 0 && shifts === 0
  const { cp, cpk, pp, ppk, intervals, expectedPpm, observedPpm, normality } = figures
  return {
    n: figures.n,
    samples: samples.length,
    basis: chart.basis,
    lowerMg: lower,
    upperMg: upper,
    targetMg: chart.targetMg,
    meanMg: figures.mean,
    sdMg: figures.sigmaOverall,
    ...{ cp, cpk, pp, ppk, intervals, observedPpm },
    expectedPpm: expectedPpm.total,
    normalityPValue: normality?.pValue ?? null,
    isStable,
    stability: stabilitySentence(signals, shifts),
    histogram: histogramOf(values),
  }
}

function stabilitySentence(signals: number, shifts: number): string {
  if (signals === 0 && shifts === 0) return 'The chart shows no signal, so the index describes the process.'
  const parts = [
    ...(signals > 0 ? [`${signals} sample${signals === 1 ? '' : 's'} with a signal`] : []),
    ...(shifts > 0 ? [`${shifts} change${shifts === 1 ? '' : 's'} of tooling or setting`] : []),
  ]
  return `The run was not stable (${parts.join(', ')}): the index describes this batch, not what the process can do.`
}

/** Deviations of each capsule from the median of its own sample: one bad pin must not drag the centre. */
function deviationsByPosition(samples: readonly SampleWeights[]): Map<number, number[]> {
  const byPosition = new Map<number, number[]>()
  for (const { valuesMg, positions } of samples) {
    const median = medianOf(valuesMg)
    for (const [place, position] of positions.entries()) {
      if (position === null) continue
      const own = byPosition.get(position) ?? []
      own.push((valuesMg[place] ?? median) - median)
      byPosition.set(position, own)
    }
  }
  return byPosition
}

const ALPHA = 0.01

/** Which positions differ from the rest: analysis of means over all samples, each on its own centre. */
export async function readBatchPositions(actor: Actor, batchId: string): Promise<BatchPositions> {
  await readBatchChart(actor, batchId, {})
  const samples = await batchWeights(batchId)
  const byPosition = [...deviationsByPosition(samples)].sort(([a], [b]) => a - b)
  if (byPosition.length < 2 || byPosition.every(([, values]) => values.length < 2)) {
    return {
      positions: [],
      samples: samples.length,
      sentence: 'Positions can be compared once two samples are weighed position by position.',
    }
  }
  const { means, grandMean, lower, upper, outside } = analysisOfMeans(
    byPosition.map(([, values]) => values),
    ALPHA,
  )
  const positions = byPosition.map(([position, values], place) => ({
    position,
    n: values.length,
    offsetMg: (means[place] ?? 0) - grandMean,
    lowerMg: (lower[place] ?? 0) - grandMean,
    upperMg: (upper[place] ?? 0) - grandMean,
    isOutside: outside.includes(place),
  }))
  return { positions, samples: samples.length, sentence: positionSentence(positions) }
}

function positionSentence(positions: BatchPositions['positions']): string {
  const found = positions.filter(({ isOutside }) => isOutside).toSorted((a, b) => Math.abs(b.offsetMg) - Math.abs(a.offsetMg))
  const [worst] = found
  if (!worst) return 'No position differs from the others beyond its decision limits.'
  const side = worst.offsetMg < 0 ? 'light' : 'heavy'
  const rest =
    found.length > 1
      ? ` Beyond their limits too: ${found
          .slice(1)
          .map(({ position }) => position)
          .join(', ')}.`
      : ''
  return `Position ${worst.position} is ${Math.abs(worst.offsetMg).toFixed(1)} mg ${side} on every index: look first at the pins and springs of position ${worst.position}, at all stations.${rest}`
}
