import { requireWhole } from '../errors.ts'

/** Points and weights that integrate over an interval. */
export interface Quadrature {
  nodes: Float64Array
  weights: Float64Array
}

/**
 * Gauss–Legendre quadrature: exact for polynomials of degree 2n − 1.
 *
 * Method  Newton's iteration on the Legendre polynomial Pₙ, whose values come from the three-term recurrence, started at
 *         cos(π(i − 1/4)/(n + 1/2)); weights 2/((1 − x²)·P′ₙ(x)²), stretched from [−1, 1] to [lower, upper].
 * @param n nodes, a whole number from 1 to 1000
 * @param interval its ends, in the unit of the nodes
 * @throws {StatisticsError} `not-whole`, `out-of-range`
 * @see M. Abramowitz, I. A. Stegun, Handbook of Mathematical Functions, 25.4.29 (cited from memory)
 */
export function gaussLegendre(n: number, { lower, upper }: { lower: number; upper: number }): Quadrature {
  requireWhole('n', n, { min: 1, max: 1000 })
  const nodes = new Float64Array(n)
  const weights = new Float64Array(n)
  const middle = (upper + lower) / 2
  const half = (upper - lower) / 2
  for (let place = 0; place < (n + 1) / 2; place++) {
    let x = Math.cos((Math.PI * (place + 0.75)) / (n + 0.5))
    let slope = 0
    for (let step = 0; step < 100; step++) {
      const legendre = legendreAt(n, x)
      slope = legendre.slope
      const correction = legendre.value / slope
      x -= correction
      if (Math.abs(correction) < 1e-15) break
    }
    const weight = (2 * half) / ((1 - x * x) * slope * slope)
    nodes[place] = middle - half * x
    nodes[n - 1 - place] = middle + half * x
    weights[place] = weight
    weights[n - 1 - place] = weight
  }
  return { nodes, weights }
}

function legendreAt(n: number, x: number): { value: number; slope: number } {
  let before = 0
  let value = 1
  for (let degree = 1; degree <= n; degree++) {
    const next = ((2 * degree - 1) * x * value - (degree - 1) * before) / degree
    before = value
    value = next
  }
  return { value, slope: (n * (x * value - before)) / (x * x - 1) }
}
