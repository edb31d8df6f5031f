import { requireFinite, requirePositive, requireShare } from '../errors.ts'
import { findRoot } from './find-root.ts'
import { normalCumulative } from './normal.ts'
import { scaledChiNodes } from './scaled-chi.ts'

/**
 * P(T ≤ t) of the noncentral t: T = (Z + δ)/√(χ²/df).
 *
 * Formula  mean of Φ(t·s − δ) over the distribution of s = √(χ²/df), by Gauss–Legendre quadrature; absolute error below 1e-12.
 * @param t a finite number
 * @param df degrees of freedom, above zero
 * @param delta noncentrality
 * @throws {StatisticsError} `not-finite`, `not-positive`
 * @see ISO 16269-6:2014 uses it for one-sided tolerance factors; fixtures/reference/distributions.json
 */
export function noncentralTCumulative(t: number, df: number, delta: number): number {
  requireFinite('t', t)
  requireFinite('delta', delta)
  requirePositive('df', df)
  const { s, weights } = scaledChiNodes(df)
  let sum = 0
  for (let place = 0; place < s.length; place++) sum += weights[place]! * normalCumulative(t * s[place]! - delta)
  return sum
}

/**
 * The t below which the noncentral t distribution holds the share p.
 * @throws {StatisticsError} `not-finite`, `out-of-range`, `not-positive`
 */
export function noncentralTQuantile(p: number, df: number, delta: number): number {
  requireShare('p', p)
  const miss = (t: number): number => noncentralTCumulative(t, df, delta) - p
  let width = 1 + Math.abs(delta)
  while (miss(delta + width) < 0) width *= 2
  let below = 1 + Math.abs(delta)
  while (miss(delta - below) > 0) below *= 2
  return findRoot(miss, delta - below, delta + width, 1e-14)
}
