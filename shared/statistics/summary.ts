import { requireValues, StatisticsError } from './errors.ts'
import { medianOf } from './selection.ts'

/** What can be said of a list of values without an assumption. Units are those of the values. */
export interface Summary {
  n: number
  mean: number
  /** Standard deviation with the divisor n − 1. */
  sd: number
  variance: number
  range: number
  min: number
  max: number
  median: number
  /** 100 · SD / |mean|; null where the mean is zero or so near it that the ratio is no number. */
  rsdPercent: number | null
}

/** What two samples must remember so that they can be summarised as one. */
export interface Moments {
  n: number
  mean: number
  /** Sum of the squared distances from the mean, in squared units. */
  sumOfSquares: number
  min: number
  max: number
}

/**
 * Summarises a list of values.
 *
 * Formula  mean = Σx/n, variance = Σ(x − mean)²/(n − 1), SD = √variance, range = max − min.
 * Method   two passes with compensated sums, so that no digit is lost when the values are large and their spread is small.
 * @param values at least two finite numbers, one unit
 * @throws {StatisticsError} `too-few-values`, `not-finite`; `out-of-range` where a square does not fit a number (above about 1e154)
 * @see T. F. Chan, G. H. Golub, R. J. LeVeque, The American Statistician 37 (1983) 242–247 (cited from memory);
 *      certified values of the NIST Statistical Reference Datasets in fixtures/reference/summary.json
 */
export function summarise(values: ArrayLike<number>): Summary {
  requireValues('values', values, { min: 2 })
  const { n, mean, sumOfSquares, min, max } = momentsOf(values)
  const variance = sumOfSquares / (n - 1)
  const sd = Math.sqrt(variance)
  return { n, mean, sd, variance, range: max - min, min, max, median: medianOf(values), rsdPercent: rsdPercentOf(mean, sd) }
}

/**
 * The relative standard deviation in percent, 100 · SD / |mean|.
 * @param mean in the unit of the values
 * @param sd in the same unit
 * @returns percent, or null where the mean is zero or so near it that the ratio is no number
 */
export function rsdPercentOf(mean: number, sd: number): number | null {
  const percent = 100 * (sd / Math.abs(mean))
  return Number.isFinite(percent) ? percent : null
}

/**
 * The moments of a list of values, to be merged with others by {@link mergeMoments}.
 * @param values at least one finite number, one unit
 * @throws {StatisticsError} `too-few-values`, `not-finite`, `out-of-range`
 */
export function momentsOf(values: ArrayLike<number>): Moments {
  requireValues('values', values, { min: 1 })
  const n = values.length
  const near = compensatedMean(values)
  let min = values[0]!
  let max = min
  let sum = 0
  let lost = 0
  let drift = 0
  for (let place = 0; place < n; place++) {
    const value = values[place]!
    if (value < min) min = value
    else if (value > max) max = value
    const distance = value - near
    drift += distance
    const square = distance * distance
    const next = sum + square
    // Squares are never negative, so the larger of the two terms is known without a sign.
    lost += sum >= square ? sum - next + square : square - next + sum
    sum = next
  }
  // `drift` would be zero if `near` were the exact mean: it mends the mean, and its square takes out what the rounding put in.
  const sumOfSquares = min === max ? 0 : Math.max(0, sum + lost - (drift * drift) / n)
  requireRepresentable(sumOfSquares, max - min)
  return { n, mean: near + drift / n, sumOfSquares, min, max }
}

/**
 * The moments of two samples taken together, without their values; merging equals summarising the merge.
 *
 * Formula  δ = mean₂ − mean₁; mean = mean₁ + δ·n₂/n; S = S₁ + S₂ + δ²·n₁·n₂/n.
 * @param first moments of at least one value
 * @param second moments of at least one value, same unit
 * @throws {StatisticsError} `out-of-range` where a square does not fit a number
 * @see T. F. Chan, G. H. Golub, R. J. LeVeque, The American Statistician 37 (1983) 242–247 (cited from memory)
 */
export function mergeMoments(first: Moments, second: Moments): Moments {
  const n = first.n + second.n
  const min = Math.min(first.min, second.min)
  const max = Math.max(first.max, second.max)
  const delta = second.mean - first.mean
  const share = second.n / n
  const sumOfSquares = first.sumOfSquares + second.sumOfSquares + delta * delta * first.n * share
  requireRepresentable(sumOfSquares, max - min)
  return { n, mean: first.mean + delta * share, sumOfSquares, min, max }
}

/** Σx/n by Neumaier's compensated sum, the rounding errors being added up beside it. */
function compensatedMean(values: ArrayLike<number>): number {
  let sum = 0
  let lost = 0
  for (let place = 0; place < values.length; place++) {
    const value = values[place]!
    const next = sum + value
    lost += Math.abs(sum) >= Math.abs(value) ? sum - next + value : value - next + sum
    sum = next
  }
  return (sum + lost) / values.length
}

function requireRepresentable(sumOfSquares: number, range: number): void {
  if (Number.isFinite(sumOfSquares) && Number.isFinite(range)) return
  throw new StatisticsError('out-of-range', 'values', 'values are so far apart that their variance does not fit a number.')
}
