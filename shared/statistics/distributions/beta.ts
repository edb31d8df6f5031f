import { logGamma, nonZero, stirlingRest } from './gamma.ts'

const MAX_TERMS = 100_000
const PRECISION = 4e-16
const LARGE = 20

/** ln of x^a (1−x)^b Γ(a+b)/(Γ(a)Γ(b)); for large a and b in a form without differences of large numbers. */
function logPrefactor(a: number, b: number, x: number, y: number): number {
  if (a < LARGE || b < LARGE) return a * Math.log(x) + b * Math.log(y) + logGamma(a + b) - logGamma(a) - logGamma(b)
  const n = a + b
  const rest = stirlingRest(n) - stirlingRest(a) - stirlingRest(b)
  const xOff = (x * n - a) / a
  const yOff = (y * n - b) / b
  return a * Math.log1p(xOff) + b * Math.log1p(yOff) + 0.5 * Math.log((a * b) / (2 * Math.PI * n)) + rest
}

/**
 * The two shares of the beta distribution below and above x, each computed where it is small.
 * `y` is 1 − x, passed apart so that a tail near x = 1 keeps its digits.
 *
 * Formula  continued fraction of I_x(a, b), by Lentz's method; x and y change places where it would be slow.
 * @see M. Abramowitz, I. A. Stegun, Handbook of Mathematical Functions, 26.5.8 (cited from memory)
 */
export function betaShares(a: number, b: number, x: number, y: number): { below: number; above: number } {
  if (x <= 0) return { below: 0, above: 1 }
  if (y <= 0) return { below: 1, above: 0 }
  if (x > (a + 1) / (a + b + 2)) {
    const { below, above } = betaShares(b, a, y, x)
    return { below: above, above: below }
  }
  const below = (Math.exp(logPrefactor(a, b, x, y)) * betaFraction(a, b, x)) / a
  return { below, above: 1 - below }
}

function betaFraction(a: number, b: number, x: number): number {
  let c = 1
  let d = 1 / nonZero(1 - ((a + b) * x) / (a + 1))
  let h = d
  for (let m = 1; m < MAX_TERMS; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m))
    d = 1 / nonZero(1 + even * d)
    c = nonZero(1 + even / c)
    h *= d * c
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1))
    d = 1 / nonZero(1 + odd * d)
    c = nonZero(1 + odd / c)
    const factor = d * c
    h *= factor
    if (Math.abs(factor - 1) < PRECISION) break
  }
  return h
}
