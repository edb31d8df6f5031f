/** Coefficients of the Lanczos series with g = 607/128 and 15 terms; relative error below 1e-14. */
const LANCZOS_G = 607 / 128
const LANCZOS = [
  0.99999999999999709182, 57.156235665862923517, -59.597960355475491248, 14.136097974741747174, -0.49191381609762019978,
  0.33994649984811888699e-4, 0.46523628927048575665e-4, -0.98374475304879564677e-4, 0.15808870322491248884e-3, -0.21026444172410488319e-3,
  0.2174396181152126432e-3, -0.16431810653676389022e-3, 0.84418223983852743293e-4, -0.2619083840158140867e-4, 0.36899182659531622704e-5,
] as const

/**
 * ln Γ(x) for x > 0.
 * @see C. Lanczos, SIAM J. Numer. Anal. B 1 (1964) 86-96; coefficients for g = 607/128 by P. Godfrey, cited from memory
 */
export function logGamma(x: number): number {
  if (x < 0.5) return Math.log(Math.PI / Math.sin(Math.PI * x)) - logGamma(1 - x)
  let sum = LANCZOS[0] as number
  for (let term = 1; term < LANCZOS.length; term++) sum += LANCZOS[term]! / (x - 1 + term)
  const t = x - 0.5 + LANCZOS_G
  return 0.5 * Math.log(2 * Math.PI) + (x - 0.5) * Math.log(t) - t + Math.log(sum)
}

const MAX_TERMS = 100_000
const PRECISION = 1e-16
/** Keeps a continued fraction from dividing by zero. */
const TINY = 1e-300

/** ln of x^a e^{−x} / Γ(a), written so that large a lose no digits to differences of large numbers. */
function logPrefactor(a: number, x: number): number {
  if (a < 20) return a * Math.log(x) - x - logGamma(a)
  const mu = (x - a) / a
  return a * (Math.log1p(mu) - mu) + 0.5 * Math.log(a / (2 * Math.PI)) - stirlingRest(a)
}

/** ln Γ(a) − [(a − ½) ln a − a + ½ ln 2π] for a ≥ 20, from the Stirling series. */
export function stirlingRest(a: number): number {
  const square = a * a
  return (1 / 12 - (1 / 360 - (1 / 1260 - (1 / 1680 - 1 / 1188 / square) / square) / square) / square) / a
}

/**
 * The two shares of the gamma distribution of shape a below and above x: P(a, x) and Q(a, x); each is computed where it is
 * small, so that neither tail loses digits.
 *
 * Formula  x < a + 1: series of P; otherwise the continued fraction of Q.
 * @see M. Abramowitz, I. A. Stegun, Handbook of Mathematical Functions, 6.5.29 and 6.5.31 (cited from memory)
 */
export function gammaShares(a: number, x: number): { below: number; above: number } {
  if (x <= 0) return { below: 0, above: 1 }
  const prefactor = Math.exp(logPrefactor(a, x))
  if (x < a + 1) {
    const below = prefactor * gammaSeries(a, x)
    return { below, above: 1 - below }
  }
  const above = prefactor * gammaFraction(a, x)
  return { below: 1 - above, above }
}

function gammaSeries(a: number, x: number): number {
  let term = 1 / a
  let sum = term
  for (let n = 1; n < MAX_TERMS && term > sum * PRECISION; n++) {
    term *= x / (a + n)
    sum += term
  }
  return sum
}

function gammaFraction(a: number, x: number): number {
  let b = x + 1 - a
  let c = 1 / TINY
  let d = 1 / b
  let h = d
  for (let n = 1; n < MAX_TERMS; n++) {
    const an = -n * (n - a)
    b += 2
    d = 1 / nonZero(an * d + b)
    c = nonZero(b + an / c)
    const factor = d * c
    h *= factor
    if (Math.abs(factor - 1) < PRECISION * 4) break
  }
  return h
}

/** Steps off zero, where a continued fraction would divide by it. */
export function nonZero(value: number): number {
  return Math.abs(value) < TINY ? TINY : value
}
