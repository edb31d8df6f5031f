import { oneWayAnova } from './analysis-of-variance.ts'
import { largestDeviationQuantile } from './distributions/largest-deviation.ts'
import { requireShare } from './errors.ts'
import { momentsOf } from './summary.ts'

export interface AnalysisOfMeans {
  grandMean: number
  means: number[]
  /** Decision limits, one a group. */
  lower: number[]
  upper: number[]
  /** Groups whose mean lies beyond its limits, counted from 0. */
  outside: number[]
  /** The critical value behind the limits. */
  h: number
}

/**
 * Analysis of means: which groups (positions, segments) differ from the grand mean, judged all together.
 *
 * Formula  grand mean ± h(α; k, df)·√MSw·√((N − nᵢ)/(N·nᵢ)); with equal sizes √((k − 1)/N). h is exact for equal sizes; with
 *          unequal sizes the same h is used, which errs to the safe side.
 * @param groups at least two, at least one with two values, one unit
 * @param alpha the chance of any false finding, all groups together
 * @throws {StatisticsError} `too-few-values`, `not-finite`, `out-of-range`
 * @see L. S. Nelson, J. Quality Technology 15 (1983) 40-44; fixtures/reference/means.json
 */
export function analysisOfMeans(groups: readonly ArrayLike<number>[], alpha: number): AnalysisOfMeans {
  requireShare('alpha', alpha)
  const { within } = oneWayAnova(groups)
  const moments = groups.map((values) => momentsOf(values))
  const total = moments.reduce((sum, { n }) => sum + n, 0)
  const grandMean = moments.reduce((sum, { n, mean }) => sum + (n * mean) / total, 0)
  const h = largestDeviationQuantile(alpha, groups.length, within.df)
  const halves = moments.map(({ n }) => h * Math.sqrt(within.ms) * Math.sqrt((total - n) / (total * n)))
  const means = moments.map(({ mean }) => mean)
  return {
    grandMean,
    means,
    lower: halves.map((half) => grandMean - half),
    upper: halves.map((half) => grandMean + half),
    outside: means.flatMap((mean, group) => (Math.abs(mean - grandMean) > halves[group]! ? [group] : [])),
    h,
  }
}
