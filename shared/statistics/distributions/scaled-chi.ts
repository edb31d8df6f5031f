import { gaussLegendre } from '../run-length/gauss-legendre.ts'
import { logGamma } from './gamma.ts'

/** Half the width of the window, in standard deviations of the estimate: what lies outside is below 1e-16. */
const WINDOW = 9
const NODES = 96

/**
 * Nodes and weights for a mean over the distribution of an estimated standard deviation, in units of the true one:
 * s = √(χ²/df). The weights hold the density and add up to 1.
 *
 * Density  f(s) = 2 (df/2)^(df/2) / Γ(df/2) · s^(df−1) · e^(−df·s²/2); spread about 1/√(2 df).
 */
export function scaledChiNodes(df: number): { s: Float64Array; weights: Float64Array } {
  const spread = 1 / Math.sqrt(2 * df)
  const { nodes, weights } = gaussLegendre(NODES, { lower: Math.max(0, 1 - WINDOW * spread), upper: 1 + WINDOW * spread })
  const constant = Math.LN2 + (df / 2) * Math.log(df / 2) - logGamma(df / 2)
  let total = 0
  for (let place = 0; place < NODES; place++) {
    const s = nodes[place]!
    weights[place] = weights[place]! * Math.exp(constant + (df - 1) * Math.log(s) - (df * s * s) / 2)
    total += weights[place]!
  }
  for (let place = 0; place < NODES; place++) weights[place] = weights[place]! / total
  return { s: nodes, weights }
}
