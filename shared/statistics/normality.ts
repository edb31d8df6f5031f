import { normalLogCumulative } from './distributions/normal-log.ts'
import { normalCumulative, normalQuantile } from './distributions/normal.ts'
import { requireValues, StatisticsError } from './errors.ts'
import { sortedCopy } from './sorting.ts'
import { momentsOf } from './summary.ts'

export interface Normality {
  statistic: number
  pValue: number
}

/** Mean and SD of the values; equal values have no shape to test. */
function standardise(values: Float64Array): { mean: number; sd: number } {
  const { mean, sumOfSquares, n } = momentsOf(values)
  const sd = Math.sqrt(sumOfSquares / (n - 1))
  if (!(sd > 0)) throw new StatisticsError('no-variation', 'values', 'All values are equal, so their shape cannot be tested.')
  return { mean, sd }
}

/**
 * Anderson–Darling test for a normal distribution of unknown mean and SD.
 *
 * Formula  A² = −n − Σ (2i − 1)[ln Φ(zᵢ) + ln(1 − Φ(z₍ₙ₊₁₋ᵢ₎))]/n; p from A²(1 + 0.75/n + 2.25/n²) by the polynomials of
 *          D'Agostino and Stephens. The statistic is given before that adjustment.
 * @param values at least 8 finite numbers
 * @throws {StatisticsError} `too-few-values`, `not-finite`, `no-variation`
 * @see R. B. D'Agostino, M. A. Stephens, Goodness-of-Fit Techniques (1986), table 4.9; fixtures/reference/normality.json
 */
export function andersonDarling(values: ArrayLike<number>): Normality {
  requireValues('values', values, { min: 8 })
  const x = sortedCopy(values)
  const n = x.length
  const { mean, sd } = standardise(x)
  let sum = 0
  for (let i = 0; i < n; i++) {
    const z = (x[i]! - mean) / sd
    // Each value stands once for itself and once as the mirror of the one as far from the other end.
    sum += (2 * i + 1) * normalLogCumulative(z) + (2 * (n - i) - 1) * normalLogCumulative(-z)
  }
  const statistic = -n - sum / n
  return { statistic, pValue: andersonDarlingProbability(statistic * (1 + 0.75 / n + 2.25 / (n * n))) }
}

function andersonDarlingProbability(a: number): number {
  if (a >= 13) return 0
  if (a >= 0.6) return Math.exp(1.2937 - 5.709 * a + 0.0186 * a * a)
  if (a >= 0.34) return Math.exp(0.9177 - 4.279 * a - 1.38 * a * a)
  if (a >= 0.2) return 1 - Math.exp(-8.318 + 42.796 * a - 59.938 * a * a)
  return 1 - Math.exp(-13.436 + 101.14 * a - 223.73 * a * a)
}

const polynomial = (coefficients: readonly number[], x: number): number =>
  coefficients.reduceRight((sum, coefficient) => sum * x + coefficient, 0)

/** Royston's weights: exact in the middle, corrected at the two ends. */
function shapiroWilkWeights(n: number): Float64Array {
  const m = Float64Array.from({ length: n }, (_, i) => normalQuantile((i + 1 - 0.375) / (n + 0.25)))
  const squares = m.reduce((sum, each) => sum + each * each, 0)
  const u = 1 / Math.sqrt(n)
  const a = new Float64Array(n)
  if (n === 3) return Float64Array.of(-Math.SQRT1_2, 0, Math.SQRT1_2)
  const last = m[n - 1]! / Math.sqrt(squares) + polynomial([0, 0.221157, -0.147981, -2.07119, 4.434685, -2.706056], u)
  a[n - 1] = last
  if (n <= 5) {
    const phi = (squares - 2 * m[n - 1]! ** 2) / (1 - 2 * last * last)
    for (let i = 1; i < n - 1; i++) a[i] = m[i]! / Math.sqrt(phi)
  } else {
    const next = m[n - 2]! / Math.sqrt(squares) + polynomial([0, 0.042981, -0.293762, -1.752461, 5.682633, -3.582633], u)
    const phi = (squares - 2 * m[n - 1]! ** 2 - 2 * m[n - 2]! ** 2) / (1 - 2 * last * last - 2 * next * next)
    a[n - 2] = next
    a[1] = -next
    for (let i = 2; i < n - 2; i++) a[i] = m[i]! / Math.sqrt(phi)
  }
  a[0] = -last
  return a
}

/**
 * Shapiro–Wilk test for a normal distribution.
 *
 * Formula  W = (Σ aᵢ x₍ᵢ₎)² / Σ(x − x̄)², weights and p-value by Royston's approximation.
 * @param values 3 to 5000 finite numbers, not all equal
 * @throws {StatisticsError} `too-few-values`, `too-many-values`, `not-finite`, `no-variation`
 * @see P. Royston, Algorithm AS R94, Applied Statistics 44 (1995) 547-551; fixtures/reference/normality.json
 */
export function shapiroWilk(values: ArrayLike<number>): Normality {
  requireValues('values', values, { min: 3 })
  if (values.length > 5000)
    throw new StatisticsError('too-many-values', 'values', `The approximation holds up to 5000 values; there are ${values.length}.`)
  const x = sortedCopy(values)
  const n = x.length
  const { mean } = standardise(x)
  const a = shapiroWilkWeights(n)
  let weighted = 0
  let squares = 0
  for (let i = 0; i < n; i++) {
    weighted += a[i]! * (x[i]! - mean)
    squares += (x[i]! - mean) ** 2
  }
  const statistic = Math.min(1, (weighted * weighted) / squares)
  return { statistic, pValue: shapiroWilkProbability(statistic, n) }
}

function shapiroWilkProbability(w: number, n: number): number {
  if (n === 3) return Math.max(0, (6 / Math.PI) * (Math.asin(Math.sqrt(w)) - Math.asin(Math.sqrt(0.75))))
  if (w >= 1) return 1
  const y = Math.log(1 - w)
  if (n <= 11) {
    const gamma = polynomial([-2.273, 0.459], n)
    if (y >= gamma) return 0
    const mu = polynomial([0.544, -0.39978, 0.025054, -6.714e-4], n)
    const sigma = Math.exp(polynomial([1.3822, -0.77857, 0.062767, -0.0020322], n))
    return normalCumulative((mu + Math.log(gamma - y)) / sigma)
  }
  const log = Math.log(n)
  const mu = polynomial([-1.5861, -0.31082, -0.083751, 0.0038915], log)
  const sigma = Math.exp(polynomial([-0.4803, -0.082676, 0.0030302], log))
  return normalCumulative((mu - y) / sigma)
}
