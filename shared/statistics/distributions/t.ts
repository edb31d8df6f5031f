import { requireFinite, requirePositive, requireShare } from '../errors.ts'
import { betaShares } from './beta.ts'
import { bracketAbove, findRoot } from './find-root.ts'

/** P(T > t) for t ≥ 0. */
function tail(t: number, df: number): number {
  const square = t * t
  return betaShares(df / 2, 0.5, df / (df + square), square / (df + square)).below / 2
}

/**
 * P(T ≤ t) of Student's t with df degrees of freedom; relative error about 1e-13 in both tails.
 * @throws {StatisticsError} `not-finite`, `not-positive`
 * @see fixtures/reference/distributions.json
 */
export function tCumulative(t: number, df: number): number {
  requireFinite('t', t)
  requirePositive('df', df)
  return t < 0 ? tail(-t, df) : 1 - tail(t, df)
}

/** P(|T| ≥ |t|): the two-sided p-value, exact also where it is tiny. */
export function tTwoSided(t: number, df: number): number {
  requireFinite('t', t)
  requirePositive('df', df)
  return 2 * tail(Math.abs(t), df)
}

/**
 * The t below which the distribution holds the share p.
 * @throws {StatisticsError} `not-finite`, `out-of-range`, `not-positive`
 */
export function tQuantile(p: number, df: number): number {
  requireShare('p', p)
  requirePositive('df', df)
  if (p === 0.5) return 0
  const small = p < 0.5 ? p : 1 - p
  const miss = (t: number): number => tail(t, df) - small
  const t = findRoot(miss, 0, bracketAbove(miss, 1))
  return p < 0.5 ? -t : t
}
