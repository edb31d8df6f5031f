import { fUpperTail } from './distributions/f.ts'
import { tQuantile, tTwoSided } from './distributions/t.ts'
import { requireShare, requireValues, StatisticsError } from './errors.ts'
import { oneWayAnova } from './analysis-of-variance.ts'
import { medianOf } from './selection.ts'
import { summarise } from './summary.ts'

export interface Comparison {
  /** Mean after minus mean before. */
  difference: number
  interval: [number, number]
  t: number
  df: number
  pValue: number
  /** Variance after over variance before. */
  varianceRatio: number | null
  spreadPValue: number | null
}

/**
 * Whether groups spread alike: analysis of variance of the distances from each group's own median (Brown–Forsythe).
 * @param groups at least two, each with at least two finite numbers
 * @returns F, its degrees of freedom and p; p is `null` when no distance varies
 * @throws {StatisticsError} `too-few-values`, `not-finite`
 * @see M. B. Brown, A. B. Forsythe, JASA 69 (1974) 364-367; NIST/SEMATECH e-Handbook 1.3.5.10
 */
export function brownForsythe(groups: readonly ArrayLike<number>[]): {
  statistic: number | null
  df: [number, number]
  pValue: number | null
} {
  const distances = groups.map((values, place) => {
    requireValues(`groups[${place}]`, values, { min: 2 })
    const median = medianOf(values)
    return Array.from(values, (value) => Math.abs(value - median))
  })
  const { between, within } = oneWayAnova(distances)
  const df: [number, number] = [between.df, within.df]
  if (!(within.ms > 0)) return { statistic: null, df, pValue: null }
  const statistic = between.ms / within.ms
  return { statistic, df, pValue: fUpperTail(statistic, ...df) }
}

/**
 * Before and after a change: the means by Welch's t with its interval, the spreads by Brown–Forsythe.
 *
 * Formula  t = (x̄₂ − x̄₁)/√(s₁²/n₁ + s₂²/n₂), degrees of freedom by Satterthwaite.
 * @param request two lists of at least two values each, one unit; confidence between 0 and 1
 * @throws {StatisticsError} `too-few-values`, `not-finite`, `out-of-range`, `no-variation`
 * @see B. L. Welch, Biometrika 34 (1947) 28-35; fixtures/reference/comparison.json
 */
export function compareBeforeAfter({
  before,
  after,
  confidence,
}: {
  before: ArrayLike<number>
  after: ArrayLike<number>
  confidence: number
}): Comparison {
  requireValues('before', before, { min: 2 })
  requireValues('after', after, { min: 2 })
  requireShare('confidence', confidence)
  const first = summarise(before)
  const second = summarise(after)
  const firstError = first.variance / first.n
  const secondError = second.variance / second.n
  const error = Math.sqrt(firstError + secondError)
  if (!(error > 0)) throw new StatisticsError('no-variation', 'before', 'Neither list varies, so the difference has no interval.')
  const difference = second.mean - first.mean
  const df = (firstError + secondError) ** 2 / (firstError ** 2 / (first.n - 1) + secondError ** 2 / (second.n - 1))
  const half = tQuantile(0.5 + confidence / 2, df) * error
  return {
    difference,
    interval: [difference - half, difference + half],
    t: difference / error,
    df,
    pValue: tTwoSided(difference / error, df),
    varianceRatio: first.variance > 0 ? second.variance / first.variance : null,
    spreadPValue: brownForsythe([before, after]).pValue,
  }
}
