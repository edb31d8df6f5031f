import { normalDensity } from './distributions/normal.ts'
import { requireWhole } from './errors.ts'

const SIZES = { min: 2, max: 1000 }

/** The factors that turn the spread within subgroups of n into sigma, centre lines and 3-sigma limits. Ratios without unit. */
export interface ControlFactors {
  n: number
  d2: number
  d3: number
  c4: number
  A2: number
  A3: number
  D3: number
  D4: number
  B3: number
  B4: number
  B5: number
  B6: number
  E2: number
}

/**
 * c4: the mean SD of n normal values, as a fraction of sigma. Divide an average SD by it to estimate sigma.
 *
 * Formula  c4(n) = √(2/(n−1)) · Γ(n/2) / Γ((n−1)/2), climbed from c4(2) = √(2/π) by c4(n)·c4(n+1) = √((n−1)/n);
 *          relative error below 1e-14 up to n = 1000, without a gamma function.
 * @param n values a subgroup, a whole number from 2 to 1000
 * @returns a ratio without unit, from 0.797 to 1
 * @throws {StatisticsError} `not-whole`, `out-of-range`
 * @see ASTM Manual 7A, table of factors; check values in fixtures/reference/control-factors.json
 */
export const c4 = rememberingSizes((n) => {
  let factor = Math.sqrt(2 / Math.PI)
  for (let size = 2; size < n; size++) factor = Math.sqrt((size - 1) / size) / factor
  return factor
})

/**
 * d2: the mean range of n normal values, in sigmas. Divide an average range by it to estimate sigma.
 *
 * Formula  d2(n) = ∫₀^∞ (1 − P(w)) dw, P(w) = n ∫ φ(x)·(Φ(x + w) − Φ(x))ⁿ⁻¹ dx being the chance of a range up to w.
 * Method   see {@link rangeMoments}; twelve digits and more from n = 2 to 1000.
 * @param n values a subgroup, a whole number from 2 to 1000
 * @returns a ratio without unit, from 1.128 to 6.483
 * @throws {StatisticsError} `not-whole`, `out-of-range`
 * @see L. H. C. Tippett, Biometrika 17 (1925) 364–387; check values in fixtures/reference/control-factors.json
 */
export function d2(n: number): number {
  return rangeMoments(n).mean
}

/**
 * d3: the standard deviation of the range of n normal values, in sigmas.
 *
 * Formula  d3(n) = √(2 ∫₀^∞ w·(1 − P(w)) dw − d2²) with P as in {@link d2}.
 * @param n values a subgroup, a whole number from 2 to 1000
 * @returns a ratio without unit, from 0.888 down to 0.497
 * @throws {StatisticsError} `not-whole`, `out-of-range`
 * @see L. H. C. Tippett, Biometrika 17 (1925) 364–387; check values in fixtures/reference/control-factors.json
 */
export function d3(n: number): number {
  return rangeMoments(n).sd
}

/**
 * Every factor for one size.
 *
 * Formula  A2 = 3/(d2√n), A3 = 3/(c4√n), D3, D4 = 1 ∓ 3d3/d2, B3, B4 = 1 ∓ 3√(1 − c4²)/c4, B5, B6 = c4 ∓ 3√(1 − c4²),
 *          E2 = 3/d2; lower factors are not below 0.
 * @param n values a subgroup, a whole number from 2 to 1000
 * @throws {StatisticsError} `not-whole`, `out-of-range`
 * @see ASTM Manual 7A, table of factors; ISO 7870-2:2013 (cited from memory); check values in fixtures/reference/control-factors.json
 */
export function controlFactors(n: number): ControlFactors {
  const meanSd = c4(n)
  const sdOfSd = Math.sqrt(1 - meanSd * meanSd)
  const { mean, sd } = rangeMoments(n)
  return {
    n,
    d2: mean,
    d3: sd,
    c4: meanSd,
    A2: 3 / (mean * Math.sqrt(n)),
    A3: 3 / (meanSd * Math.sqrt(n)),
    D3: Math.max(0, 1 - (3 * sd) / mean),
    D4: 1 + (3 * sd) / mean,
    B3: Math.max(0, 1 - (3 * sdOfSd) / meanSd),
    B4: 1 + (3 * sdOfSd) / meanSd,
    B5: Math.max(0, meanSd - 3 * sdOfSd),
    B6: meanSd + 3 * sdOfSd,
    E2: 3 / mean,
  }
}

/** Keeps what was worked out for a size, after refusing sizes that have no factor. */
function rememberingSizes<T>(workOut: (n: number) => T): (n: number) => T {
  const known = new Map<number, T>()
  return (n) => {
    const before = known.get(n)
    if (before !== undefined) return before
    requireWhole('n', n, SIZES)
    const found = workOut(n)
    known.set(n, found)
    return found
  }
}

/**
 * Mean and SD of the range, by quadrature: over x the trapezoid rule, which on a smooth function that dies away at both
 * ends converges faster than any power of its step; over w Gauss–Legendre panels. Both grids reach to where less than
 * 1e-14 is left, also for a thousand values.
 */
const rangeMoments = rememberingSizes((n) => {
  const { nodes, spans, densities } = rangeGrid()
  let mean = 0
  let half = 0
  nodes.forEach(({ at, weight }, k) => {
    let within = 0
    const row = k * densities.length
    for (let j = 0; j < densities.length; j++) within += densities[j]! * spans[row + j]! ** (n - 1)
    const beyond = weight * (1 - n * within)
    mean += beyond
    half += at * beyond
  })
  return { mean, sd: Math.sqrt(2 * half - mean * mean) }
})

/** The six positive nodes of Gauss–Legendre quadrature with twelve points on [−1, 1], and their weights (Abramowitz & Stegun 25.4.30). */
const GAUSS_LEGENDRE = [
  [0.125233408511468916, 0.249147045813402785],
  [0.367831498998180194, 0.233492536538354809],
  [0.587317954286617447, 0.203167426723065922],
  [0.769902674194304687, 0.160078328543346226],
  [0.904117256370474857, 0.106939325995318431],
  [0.981560634246719251, 0.047175336386511827],
] as const

const WIDEST_RANGE = 14
const FARTHEST_VALUE = 9
const STEPS_A_SIGMA = 16

/** Nodes over w, and the normal area from x to x + w for each of them at each x: the same for every n, worked out when first needed. */
const rangeGrid = once(() => {
  const panels = Array.from({ length: WIDEST_RANGE }, (_, panel) => ({ panel, nodes: gaussLegendreOver(panel, 1) }))
  const xs = Array.from({ length: 2 * FARTHEST_VALUE * STEPS_A_SIGMA + 1 }, (_, j) => j / STEPS_A_SIGMA - FARTHEST_VALUE)
  const densities = Float64Array.from(xs, (x) => normalDensity(x) / STEPS_A_SIGMA)
  const nodes = panels.flatMap((each) => each.nodes)
  const spans = new Float64Array(nodes.length * xs.length)
  xs.forEach((x, j) => {
    let area = 0
    let k = 0
    for (const { panel, nodes: within } of panels) {
      for (const { at } of within) spans[k++ * xs.length + j] = area + normalArea(x + panel, at - panel)
      area += normalArea(x + panel, 1)
    }
  })
  return { nodes, spans, densities }
})

function gaussLegendreOver(from: number, width: number): { at: number; weight: number }[] {
  const middle = from + width / 2
  return GAUSS_LEGENDRE.flatMap(([node, weight]) =>
    [-node, node].map((each) => ({ at: middle + (each * width) / 2, weight: (weight * width) / 2 })),
  )
}

/** The area under the normal density over a stretch no wider than one sigma, where twelve nodes leave no error that a number could hold. */
function normalArea(from: number, width: number): number {
  let area = 0
  for (const [node, weight] of GAUSS_LEGENDRE) {
    const reach = (node * width) / 2
    area += weight * (normalDensity(from + width / 2 - reach) + normalDensity(from + width / 2 + reach))
  }
  return (area * width) / 2
}

function once<T extends object>(workOut: () => T): () => T {
  let found: T | undefined
  return () => (found ??= workOut())
}
