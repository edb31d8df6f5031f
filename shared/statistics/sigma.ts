import { isUsed, type Baseline } from './baseline.ts'
import { c4, d2 } from './control-factors.ts'
import { medianOf } from './selection.ts'
import type { SubgroupColumns } from './subgroups.ts'

/** The ways to estimate the standard deviation of single values from what varies at short notice. */
export const ESTIMATORS = ['rbar', 'sbar', 'pooled', 'moving-range', 'median-moving-range'] as const
export type Estimator = (typeof ESTIMATORS)[number]

/** Median of |x₁ − x₂| in units of sigma: √2 · z(0.75), the median of a normal difference without its sign. */
const MEDIAN_MOVING_RANGE = Math.SQRT2 * 0.6744897501960817

/**
 * Sigma of single values, by the estimator named.
 *
 * | Estimator | Formula |
 * |---|---|
 * | `rbar` | plain mean of Rᵢ/d2(nᵢ): each subgroup one vote |
 * | `sbar` | plain mean of sᵢ/c4(nᵢ): each subgroup one vote |
 * | `pooled` | √(Σ(nᵢ − 1)sᵢ² / Σ(nᵢ − 1)), without c4 |
 * | `moving-range` | mean of ∣xᵢ − xᵢ₋₁∣ / d2(2) |
 * | `median-moving-range` | median of ∣xᵢ − xᵢ₋₁∣ / 0.95387; one far value moves it little |
 *
 * The last two read the column of means, so they give the sigma of a mean where subgroups hold more than one value.
 * A moving range counts when both its points do; none is taken across the border of a phase.
 * @param estimator one of {@link ESTIMATORS}
 * @param columns of the whole chart, one unit
 * @param baseline the points that count
 * @returns sigma in the unit of the values; NaN, meaning none, when the baseline holds too little to estimate it
 * @throws {StatisticsError} `out-of-range` for a subgroup of more than 1000 under `rbar` and `sbar`
 * @see ASTM Manual 7A, control charts, no standard given; ISO 7870-2:2013 (cited from memory); cases in fixtures/reference/charts.json
 */
export function estimateSigma(estimator: Estimator, columns: SubgroupColumns, baseline: Baseline): number {
  switch (estimator) {
    case 'rbar':
      return meanOfRatios(columns.range, columns.n, d2, baseline)
    case 'sbar':
      return meanOfRatios(columns.sd, columns.n, c4, baseline)
    case 'pooled':
      return pooledSd(columns, baseline)
    case 'moving-range':
      return meanMovingRange(columns.mean, baseline) / d2(2)
    case 'median-moving-range':
      return medianMovingRange(columns.mean, baseline) / MEDIAN_MOVING_RANGE
  }
}

function meanOfRatios(spread: Float64Array, n: Float64Array, factorOf: (n: number) => number, baseline: Baseline): number {
  let size = 0
  let factor = NaN
  let sum = 0
  let subgroups = 0
  for (let point = baseline.from; point < baseline.to; point++) {
    if (!isUsed(baseline, point) || n[point]! < 2) continue
    if (n[point] !== size) {
      size = n[point]!
      factor = factorOf(size)
    }
    sum += spread[point]! / factor
    subgroups++
  }
  return sum / subgroups
}

function pooledSd({ n, sd }: SubgroupColumns, baseline: Baseline): number {
  let sumOfSquares = 0
  let degreesOfFreedom = 0
  for (let point = baseline.from; point < baseline.to; point++) {
    if (!isUsed(baseline, point) || n[point]! < 2) continue
    sumOfSquares += (n[point]! - 1) * sd[point]! * sd[point]!
    degreesOfFreedom += n[point]! - 1
  }
  return Math.sqrt(sumOfSquares / degreesOfFreedom)
}

/** The moving range at a point; NaN, meaning none, at the first point of a phase and beside one that is left out. */
function movingRangeAt(means: Float64Array, baseline: Baseline, point: number): number {
  const counts = point > baseline.from && isUsed(baseline, point) && isUsed(baseline, point - 1)
  return counts ? Math.abs(means[point]! - means[point - 1]!) : NaN
}

function meanMovingRange(means: Float64Array, baseline: Baseline): number {
  let sum = 0
  let ranges = 0
  for (let point = baseline.from; point < baseline.to; point++) {
    const range = movingRangeAt(means, baseline, point)
    if (Number.isNaN(range)) continue
    sum += range
    ranges++
  }
  return sum / ranges
}

function medianMovingRange(means: Float64Array, baseline: Baseline): number {
  const ranges: number[] = []
  for (let point = baseline.from; point < baseline.to; point++) {
    const range = movingRangeAt(means, baseline, point)
    if (!Number.isNaN(range)) ranges.push(range)
  }
  return ranges.length === 0 ? NaN : medianOf(ranges)
}
