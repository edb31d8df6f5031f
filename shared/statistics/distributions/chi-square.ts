import { requireFinite, requirePositive, requireShare } from '../errors.ts'
import { bracketAbove, findRoot } from './find-root.ts'
import { gammaShares } from './gamma.ts'

/**
 * P(χ² ≤ x) with df degrees of freedom; relative error about 1e-13.
 * @throws {StatisticsError} `not-finite`, `not-positive`
 * @see fixtures/reference/distributions.json
 */
export function chiSquareCumulative(x: number, df: number): number {
  requireFinite('x', x)
  requirePositive('df', df)
  return gammaShares(df / 2, x / 2).below
}

/** P(χ² > x), exact also where it is tiny. */
export function chiSquareUpperTail(x: number, df: number): number {
  requireFinite('x', x)
  requirePositive('df', df)
  return gammaShares(df / 2, x / 2).above
}

/**
 * The x below which the chi-square distribution holds the share p.
 * @throws {StatisticsError} `not-finite`, `out-of-range`, `not-positive`
 */
export function chiSquareQuantile(p: number, df: number): number {
  requireShare('p', p)
  requirePositive('df', df)
  const miss = p < 0.5 ? (x: number) => chiSquareCumulative(x, df) - p : (x: number) => 1 - p - chiSquareUpperTail(x, df)
  return findRoot(miss, 0, bracketAbove(miss, df))
}
