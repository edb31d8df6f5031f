import { requirePositive, requireShare, requireWhole } from '../errors.ts'
import { gaussLegendre } from '../run-length/gauss-legendre.ts'
import { findRoot } from './find-root.ts'
import { normalDensity } from './normal.ts'
import { scaledChiNodes } from './scaled-chi.ts'
import { tQuantile } from './t.ts'

const INNER = gaussLegendre(64, { lower: 0, upper: 1 })
const OUTER_PANELS = 24
const OUTER = gaussLegendre(16, { lower: 0, upper: 1 })

/**
 * P(all of k standard normal values with correlation −1/(k−1) lie within ±h): the values are deviations from their own
 * mean, so their sum is zero and they are k normal values of SD √(k/(k−1)), given a zero sum.
 *
 * Formula  √(k/2π)⁻¹-scaled Fourier inversion at a zero sum: (1/√2π) ∫ [2∫₀ˣ φ(t) cos(t·u/√k) dt]ᵏ du, x = h·√((k−1)/k).
 */
function shareWithin(h: number, k: number): number {
  const x = h * Math.sqrt((k - 1) / k)
  const root = Math.sqrt(k)
  const span = (8 + 40 / k) * Math.min(1, root / 2) * 2
  let sum = 0
  for (let panel = 0; panel < OUTER_PANELS; panel++) {
    for (let place = 0; place < OUTER.nodes.length; place++) {
      const u = (span * (panel + OUTER.nodes[place]!)) / OUTER_PANELS
      sum += ((OUTER.weights[place]! * span) / OUTER_PANELS) * cosineShare(x, u / root) ** k
    }
  }
  return (2 * sum) / Math.sqrt(2 * Math.PI)
}

/** 2 ∫₀ˣ φ(t) cos(t·v) dt. */
function cosineShare(x: number, v: number): number {
  let sum = 0
  for (let place = 0; place < INNER.nodes.length; place++) {
    const t = x * INNER.nodes[place]!
    sum += INNER.weights[place]! * normalDensity(t) * Math.cos(t * v)
  }
  return 2 * x * sum
}

const known = new Map<string, number>()

/**
 * The exact critical value h of the analysis of means: k deviations from their own mean, divided by one pooled estimate
 * of their SD with df degrees of freedom, all lie within ±h with probability 1 − alpha.
 * @param k means compared, 2 to 200
 * @param df degrees of freedom of the pooled SD, at least 1
 * @throws {StatisticsError} `not-whole`, `out-of-range`, `not-positive`
 * @see L. S. Nelson, Exact critical values for use with the analysis of means, J. Quality Technology 15 (1983) 40-44; fixtures/reference/spread-and-nesting.json
 */
export function largestDeviationQuantile(alpha: number, k: number, df: number): number {
  requireShare('alpha', alpha)
  requireWhole('k', k, { min: 2, max: 200 })
  requirePositive('df', df)
  // Two deviations from their mean are one figure with two signs.
  if (k === 2) return tQuantile(1 - alpha / 2, df)
  const key = `${alpha}/${k}/${df}`
  const before = known.get(key)
  if (before !== undefined) return before
  const h = solve(alpha, k, df)
  known.set(key, h)
  return h
}

/** Beyond this many SDs no deviation is ever found: the share is 1 to the last digit. */
const FARTHEST = 10
const TABLE_NODES = 64

/** The share as a function of h through Chebyshev points (barycentric form): the integral is done 64 times, not thousands of times. */
function tabulateShare(k: number): (h: number) => number {
  const points = Array.from({ length: TABLE_NODES }, (_, place) => {
    const angle = (Math.PI * (2 * place + 1)) / (2 * TABLE_NODES)
    const h = (FARTHEST / 2) * (1 + Math.cos(angle))
    return { h, share: shareWithin(h, k), weight: (place % 2 === 0 ? 1 : -1) * Math.sin(angle) }
  })
  return (h) => {
    if (h >= FARTHEST) return 1
    let above = 0
    let below = 0
    for (const point of points) {
      if (h === point.h) return point.share
      const pull = point.weight / (h - point.h)
      above += pull * point.share
      below += pull
    }
    return above / below
  }
}

function solve(alpha: number, k: number, df: number): number {
  const { s, weights } = scaledChiNodes(df)
  const shareAt = tabulateShare(k)
  const miss = (h: number): number => {
    let share = 0
    for (let place = 0; place < s.length; place++) if (weights[place]! > 1e-14) share += weights[place]! * shareAt(h * s[place]!)
    return share - (1 - alpha)
  }
  const single = tQuantile(1 - alpha / 2, df)
  const everySingle = tQuantile(1 - alpha / (2 * k), df)
  return findRoot(miss, single * 0.98, everySingle * 1.02, 1e-9)
}
