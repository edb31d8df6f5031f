import { normalCumulative } from './distributions/normal.ts'
import { tQuantile, tTwoSided } from './distributions/t.ts'
import { lagOneAutocorrelation } from './autocorrelation.ts'
import { requireShare, requireValues, StatisticsError } from './errors.ts'
import { medianOf } from './selection.ts'

export interface Trend {
  slope: number
  interval: [number, number]
  intercept: number
  pValue: number
  /** Median of the slopes of all pairs: a few wild points hardly move it. */
  theilSen: number
  kendallTau: number
  mannKendallPValue: number
  /** Lag-1 correlation of what the line leaves over. */
  residualAutocorrelation: number | null
  /** The interval with as many values as the correlated ones are worth. */
  autocorrelationInterval: [number, number]
  residualSd: number
}

/** More pairs than this are too many for a page that waits; every second, third … point is taken then. */
const MOST_POINTS_FOR_PAIRS = 1_500

interface Line {
  slope: number
  intercept: number
  meanX: number
  sumXX: number
  residuals: Float64Array
  residualSd: number
}

/** Least squares with both variables centred first: raw sums of times in milliseconds would lose the slope. */
function fitLine(x: ArrayLike<number>, y: ArrayLike<number>): Line {
  const n = x.length
  let meanX = 0
  let meanY = 0
  for (let place = 0; place < n; place++) {
    meanX += (x[place]! - x[0]!) / n
    meanY += (y[place]! - y[0]!) / n
  }
  meanX += x[0]!
  meanY += y[0]!
  let sumXX = 0
  let sumXY = 0
  for (let place = 0; place < n; place++) {
    sumXX += (x[place]! - meanX) ** 2
    sumXY += (x[place]! - meanX) * (y[place]! - meanY)
  }
  if (!(sumXX > 0)) throw new StatisticsError('no-variation', 'x', 'All x are equal, so there is no slope.')
  const slope = sumXY / sumXX
  const residuals = Float64Array.from({ length: n }, (_, place) => y[place]! - meanY - slope * (x[place]! - meanX))
  const residualSd = Math.sqrt(residuals.reduce((sum, residual) => sum + residual * residual, 0) / (n - 2))
  return { slope, intercept: meanY - slope * meanX, meanX, sumXX, residuals, residualSd }
}

interface Pairs {
  theilSen: number
  kendallTau: number
  mannKendallPValue: number
}

function tieSums(values: Float64Array): { pairs: number; variance: number } {
  const sorted = Float64Array.from(values).sort()
  let pairs = 0
  let variance = 0
  for (let from = 0; from < sorted.length;) {
    let to = from
    while (to < sorted.length && sorted[to] === sorted[from]) to++
    const t = to - from
    pairs += (t * (t - 1)) / 2
    variance += t * (t - 1) * (2 * t + 5)
    from = to
  }
  return { pairs, variance }
}

function comparePairs(x: Float64Array, y: Float64Array): Pairs {
  const n = x.length
  const slopes = new Float64Array((n * (n - 1)) / 2)
  let count = 0
  let score = 0
  for (let later = 1; later < n; later++) {
    for (let earlier = 0; earlier < later; earlier++) {
      const dx = x[later]! - x[earlier]!
      const dy = y[later]! - y[earlier]!
      score += Math.sign(dx) * Math.sign(dy)
      if (dx !== 0) slopes[count++] = dy / dx
    }
  }
  const all = (n * (n - 1)) / 2
  const tiesX = tieSums(x)
  const tiesY = tieSums(y)
  const spread = Math.sqrt((all - tiesX.pairs) * (all - tiesY.pairs))
  const variance = (n * (n - 1) * (2 * n + 5) - tiesX.variance - tiesY.variance) / 18
  const z = variance > 0 ? (score - Math.sign(score)) / Math.sqrt(variance) : 0
  return {
    theilSen: medianOf(slopes.subarray(0, count)),
    kendallTau: spread > 0 ? score / spread : 0,
    mannKendallPValue: Math.min(1, 2 * normalCumulative(-Math.abs(z))),
  }
}

function thinned(values: ArrayLike<number>, step: number): Float64Array {
  return Float64Array.from({ length: Math.ceil(values.length / step) }, (_, place) => values[place * step]!)
}

/**
 * A drift: the least-squares slope with its interval, a robust slope, a rank test, and how the leftovers depend on each other.
 *
 * Formula  slope ± t·s/√Σ(x − x̄)². With leftovers of lag-1 correlation r > 0 the values are worth n(1 − r)/(1 + r) independent
 *          ones: the second interval is widened accordingly. Kendall is tau-b; Mann–Kendall p by the normal approximation with
 *          ties and continuity.
 * @param request x and y of equal length, at least 3 finite values, x not all equal; confidence between 0 and 1
 * @returns slope in units of y per unit of x
 * @throws {StatisticsError} `lengths-differ`, `too-few-values`, `not-finite`, `no-variation`, `out-of-range`
 * @see P. K. Sen, JASA 63 (1968) 1379-1389; NIST StRD Norris; fixtures/reference/{trend,trend-anscombe}.json
 */
export function trend({ x, y, confidence }: { x: ArrayLike<number>; y: ArrayLike<number>; confidence: number }): Trend {
  requireValues('x', x, { min: 3 })
  requireValues('y', y, { min: 3 })
  requireShare('confidence', confidence)
  if (x.length !== y.length) throw new StatisticsError('lengths-differ', 'y', `x has ${x.length} values, y has ${y.length}.`)
  const line = fitLine(x, y)
  const df = x.length - 2
  const error = line.residualSd / Math.sqrt(line.sumXX)
  const around = (factor: number, degrees: number): [number, number] => {
    const half = tQuantile(0.5 + confidence / 2, degrees) * error * factor
    return [line.slope - half, line.slope + half]
  }
  const correlation = line.residualSd > 0 ? lagOneAutocorrelation(line.residuals) : null
  const r = Math.min(0.95, Math.max(0, correlation ?? 0))
  const worth = (1 - r) / (1 + r)
  const step = Math.ceil(x.length / MOST_POINTS_FOR_PAIRS)
  return {
    slope: line.slope,
    interval: around(1, df),
    intercept: line.intercept,
    pValue: error > 0 ? tTwoSided(line.slope / error, df) : line.slope === 0 ? 1 : 0,
    ...comparePairs(thinned(x, step), thinned(y, step)),
    residualAutocorrelation: correlation,
    autocorrelationInterval: around(Math.sqrt(1 / worth), Math.max(1, df * worth)),
    residualSd: line.residualSd,
  }
}

/**
 * How far along x the line reaches a limit, counted from the last x; `null` when it runs away from it or is level.
 * @throws {StatisticsError} `not-finite`
 */
export function distanceToLimit({ slope, intercept }: Pick<Trend, 'slope' | 'intercept'>, lastX: number, limit: number): number | null {
  requireValues('limit', [lastX, limit], { min: 2 })
  if (slope === 0) return null
  const distance = (limit - intercept) / slope - lastX
  return distance >= 0 ? distance : null
}
