import { requireFinite, requirePositive, requireShare } from '../errors.ts'
import { betaShares } from './beta.ts'
import { bracketAbove, findRoot } from './find-root.ts'

function shares(f: number, df1: number, df2: number): { below: number; above: number } {
  requireFinite('f', f)
  requirePositive('df1', df1)
  requirePositive('df2', df2)
  if (f <= 0) return { below: 0, above: 1 }
  const whole = df1 * f + df2
  return betaShares(df1 / 2, df2 / 2, (df1 * f) / whole, df2 / whole)
}

/**
 * P(F ≤ f) with df1 and df2 degrees of freedom; relative error about 1e-13.
 * @throws {StatisticsError} `not-finite`, `not-positive`
 * @see fixtures/reference/distributions.json
 */
export function fCumulative(f: number, df1: number, df2: number): number {
  return shares(f, df1, df2).below
}

/** P(F > f): the p-value of an analysis of variance, exact also where it is tiny. */
export function fUpperTail(f: number, df1: number, df2: number): number {
  return shares(f, df1, df2).above
}

/**
 * The f below which the distribution holds the share p.
 * @throws {StatisticsError} `not-finite`, `out-of-range`, `not-positive`
 */
export function fQuantile(p: number, df1: number, df2: number): number {
  requireShare('p', p)
  const miss = p < 0.5 ? (f: number) => fCumulative(f, df1, df2) - p : (f: number) => 1 - p - fUpperTail(f, df1, df2)
  return findRoot(miss, 0, bracketAbove(miss, 1))
}
