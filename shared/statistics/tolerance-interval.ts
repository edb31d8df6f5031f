import { chiSquareUpperTail } from './distributions/chi-square.ts'
import { findRoot } from './distributions/find-root.ts'
import { noncentralTQuantile } from './distributions/noncentral-t.ts'
import { normalCumulative, normalDensity, normalQuantile } from './distributions/normal.ts'
import { requireShare, requireValues, requireWhole } from './errors.ts'
import { gaussLegendre } from './run-length/gauss-legendre.ts'
import { summarise } from './summary.ts'

export interface ToleranceInterval {
  /** Times the SD, on either side of the mean. */
  k: number
  lower: number
  upper: number
}

/** The half width r around a mean that is off by z sigmas, so that z ± r still holds the coverage. */
function coveringHalfWidth(z: number, coverage: number): number {
  const miss = (r: number): number => normalCumulative(z + r) - normalCumulative(z - r) - coverage
  const centred = normalQuantile((1 + coverage) / 2)
  return findRoot(miss, centred * 0.999, centred + Math.abs(z) + 1e-9)
}

const MEAN_NODES = 48
/** The mean lies within this many of its standard errors but for 1e-18. */
const MEAN_SPAN = 9

function twoSidedFactor(n: number, coverage: number, confidence: number): number {
  const df = n - 1
  const root = Math.sqrt(n)
  const { nodes, weights } = gaussLegendre(MEAN_NODES, { lower: 0, upper: MEAN_SPAN })
  const halfWidths = Array.from(nodes, (x) => coveringHalfWidth(x / root, coverage))
  const miss = (k: number): number => {
    let share = 0
    for (let place = 0; place < MEAN_NODES; place++) {
      const density = 2 * normalDensity(nodes[place]!) * weights[place]!
      if (density > 1e-16) share += density * chiSquareUpperTail(df * (halfWidths[place]! / k) ** 2, df)
    }
    return share - confidence
  }
  let upper = 2 * normalQuantile((1 + coverage) / 2)
  while (miss(upper) < 0) upper *= 2
  return findRoot(miss, 1e-6, upper, 1e-13)
}

/** `tolerance-factor` k: mean ± k·SD (two-sided) or mean − k·SD, mean + k·SD as two bounds of their own (one-sided). */
export function toleranceFactor(
  n: number,
  { coverage, confidence, sides }: { coverage: number; confidence: number; sides: 1 | 2 },
): number {
  requireWhole('n', n, { min: 2, max: 1_000_000 })
  requireShare('coverage', coverage)
  requireShare('confidence', confidence)
  if (sides === 2) return twoSidedFactor(n, coverage, confidence)
  return noncentralTQuantile(confidence, n - 1, normalQuantile(coverage) * Math.sqrt(n)) / Math.sqrt(n)
}

/**
 * A tolerance interval of a normal distribution: with the given confidence it holds at least the given share of all capsules.
 * With one side, `lower` and `upper` are two separate bounds.
 *
 * Formula  one-sided k = t'(confidence; n − 1, z√n)/√n (noncentral t); two-sided k solves
 *          E over the mean of P(χ² > (n − 1)·r²/k²) = confidence, r the half width that holds the coverage about that mean.
 * @param values at least 2 finite numbers
 * @throws {StatisticsError} `too-few-values`, `not-finite`, `out-of-range`
 * @see ISO 16269-6:2014; R. E. Odeh, D. B. Owen, Tables for Normal Tolerance Limits (1980); fixtures/reference/tolerance.json
 */
export function toleranceInterval(
  values: ArrayLike<number>,
  options: { coverage: number; confidence: number; sides: 1 | 2 },
): ToleranceInterval {
  requireValues('values', values, { min: 2 })
  const k = toleranceFactor(values.length, options)
  const { mean, sd } = summarise(values)
  return { k, lower: mean - k * sd, upper: mean + k * sd }
}
