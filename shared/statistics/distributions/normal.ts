import { requireFinite, requireShare } from '../errors.ts'

const SQRT_2_PI = Math.sqrt(2 * Math.PI)

/** Density of the standard normal distribution at z. */
export function normalDensity(z: number): number {
  return Math.exp((-z * z) / 2) / SQRT_2_PI
}

/** Where the series gives way to the continued fraction: both hold 1e-15 relative there. */
const TAIL_FROM = 3

/**
 * P(Z ≤ z) of the standard normal distribution, exact to about 1e-15 relative also far out in the lower tail.
 *
 * Formula  |z| < 3: Φ(z) = ½ + φ(z)·(z + z³/3 + z⁵/(3·5) + …); beyond: the upper tail φ(z)/(z + 1/(z + 2/(z + 3/(z + …)))).
 * @throws {StatisticsError} `not-finite`
 * @see M. Abramowitz, I. A. Stegun, Handbook of Mathematical Functions, 26.2.11 and 26.2.14 (cited from memory); fixtures/reference/distributions.json
 */
export function normalCumulative(z: number): number {
  requireFinite('z', z)
  if (Math.abs(z) < TAIL_FROM) return 0.5 + normalDensity(z) * oddSeries(z)
  return z < 0 ? upperTail(-z) : 1 - upperTail(z)
}

function oddSeries(z: number): number {
  let term = z
  let sum = z
  for (let odd = 3; Math.abs(term) > 1e-17 * Math.abs(sum); odd += 2) {
    term *= (z * z) / odd
    sum += term
  }
  return sum
}

function upperTail(z: number): number {
  let fraction = z
  for (let level = 120; level >= 1; level--) fraction = z + level / fraction
  return normalDensity(z) / fraction
}

/** Coefficients of the rational start value, relative error below 1.2e-9 (P. J. Acklam, cited from memory); the step after it takes the rest. */
const START = {
  a: [-3.969683028665376e1, 2.209460984245205e2, -2.759285104469687e2, 1.38357751867269e2, -3.066479806614716e1, 2.506628277459239],
  b: [-5.447609879822406e1, 1.615858368580409e2, -1.556989798598866e2, 6.680131188771972e1, -1.328068155288572e1, 1],
  c: [-7.784894002430293e-3, -3.223964580411365e-1, -2.400758277161838, -2.549732539343734, 4.374664141464968, 2.938163982698783],
  d: [7.784695709041462e-3, 3.224671290700398e-1, 2.445134137142996, 3.754408661907416, 1],
} as const

const polynomial = (coefficients: readonly number[], x: number): number =>
  coefficients.reduce((sum, coefficient) => sum * x + coefficient, 0)

/**
 * The z below which the standard normal distribution holds the share p, exact to about 1e-15.
 *
 * Method  a rational start value, then one Halley step on Φ.
 * @param p between 0 and 1
 * @throws {StatisticsError} `not-finite`, `out-of-range`
 * @see fixtures/reference/distributions.json
 */
export function normalQuantile(p: number): number {
  requireShare('p', p)
  if (p > 0.5) return -lowerQuantile(1 - p)
  return p === 0.5 ? 0 : lowerQuantile(p)
}

function lowerQuantile(p: number): number {
  const start = startValue(p)
  const error = (normalCumulative(start) - p) / normalDensity(start)
  return start - error / (1 + (start * error) / 2)
}

function startValue(p: number): number {
  if (p < 0.02425) {
    const r = Math.sqrt(-2 * Math.log(p))
    return polynomial(START.c, r) / polynomial(START.d, r)
  }
  const q = p - 0.5
  return (polynomial(START.a, q * q) * q) / polynomial(START.b, q * q)
}
