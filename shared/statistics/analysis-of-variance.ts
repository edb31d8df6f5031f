import { fUpperTail } from './distributions/f.ts'
import { requireValues, StatisticsError } from './errors.ts'
import { momentsOf, type Moments } from './summary.ts'

export interface MeanSquare {
  df: number
  ss: number
  ms: number
}

export interface OneWayAnova {
  between: MeanSquare
  within: MeanSquare
  /** `null` when nothing varies inside the groups. */
  f: number | null
  pValue: number | null
  components: { between: number; within: number }
  /** The share of the variance that lies between groups. */
  iccPercent: number | null
}

/** Σ n (mean − grand mean)²; the grand mean is taken from deviations, so that large means keep their digits. */
function sumBetween(groups: readonly Moments[], total: number): number {
  const origin = groups[0]!.mean
  const grand = groups.reduce((sum, { n, mean }) => sum + n * (mean - origin), 0) / total
  return groups.reduce((sum, { n, mean }) => sum + n * (mean - origin - grand) ** 2, 0)
}

/**
 * One-way analysis of variance with variance components.
 *
 * Formula  components: within = MSw, between = max(0, (MSb − MSw)/n₀) with n₀ = (N − Σnᵢ²/N)/(k − 1); ICC = between/(between + within).
 * @param groups at least two, each with at least one finite number and more values than groups in all
 * @throws {StatisticsError} `too-few-values`, `not-finite`
 * @see NIST/SEMATECH e-Handbook 7.4; NIST StRD analysis of variance; fixtures/reference/{anova,variance-components}.json
 */
export function oneWayAnova(groups: readonly ArrayLike<number>[]): OneWayAnova {
  if (groups.length < 2) throw new StatisticsError('too-few-values', 'groups', `groups needs at least 2 groups, but has ${groups.length}.`)
  const moments = groups.map((values, place) => {
    requireValues(`groups[${place}]`, values, { min: 1 })
    return momentsOf(values)
  })
  const total = moments.reduce((sum, { n }) => sum + n, 0)
  const dfBetween = moments.length - 1
  const dfWithin = total - moments.length
  if (dfWithin < 1) throw new StatisticsError('too-few-values', 'groups', 'At least one group needs two values.')
  const between = meanSquare(sumBetween(moments, total), dfBetween)
  const within = meanSquare(
    moments.reduce((sum, { sumOfSquares }) => sum + sumOfSquares, 0),
    dfWithin,
  )
  const averageSize = (total - moments.reduce((sum, { n }) => sum + n * n, 0) / total) / dfBetween
  const components = { between: Math.max(0, (between.ms - within.ms) / averageSize), within: within.ms }
  const whole = components.between + components.within
  const f = within.ms > 0 ? between.ms / within.ms : null
  return {
    between,
    within,
    f,
    pValue: f === null ? null : fUpperTail(f, dfBetween, dfWithin),
    components,
    iccPercent: whole > 0 ? (100 * components.between) / whole : null,
  }
}

function meanSquare(ss: number, df: number): MeanSquare {
  return { df, ss, ms: ss / df }
}
