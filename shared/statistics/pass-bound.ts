import { chiSquareQuantile } from './distributions/chi-square.ts'
import { normalQuantile } from './distributions/normal.ts'
import { requirePositive, requireShare, requireWhole } from './errors.ts'
import { passProbability, passProbabilityFloor, type PassProbability, type SimulationSize } from './pass-probability.ts'

/** What was found in a sample of contents, percent of claim. */
export interface SampledContents {
  n: number
  mean: number
  sd: number
  confidence: number
  target?: number | undefined
}

/** The lower bound on the chance of passing, and the region that it was sought in. */
export interface PassBound extends PassProbability {
  /** The largest SD in the region. */
  sigmaUpper: number
  /** The means in the region at that SD. */
  meanInterval: [number, number]
  /** The corner with the least chance. */
  leastFavourableMean: number
  /** The same bound without simulation, which is somewhat smaller. */
  floor: number
}

/**
 * A lower bound on the chance that the batch passes USP <905>, from a sample, at the stated confidence.
 *
 * Method  simultaneous confidence region of mean and SD, each at the square root of the confidence:
 *         σ ≤ s·√((n−1)/χ²(1−√C; n−1)) and |μ − X̄| ≤ z((1+√C)/2)·σ/√n. The chance is least at a corner of its upper edge,
 *         where the SD is largest and the mean furthest off; it is simulated at both corners.
 * Assumes normal contents, a sample taken at random from the whole batch.
 * @param sample n at least 2, SD above zero, mean and SD in percent of claim
 * @throws {StatisticsError} `not-whole`, `out-of-range`, `not-finite`, `not-positive`
 * @see ASTM E2709 and E2810 (not at hand; the region after B. W. Lindgren); cases in fixtures/reference/pass-bound.json
 */
export function passBound({ n, mean, sd, confidence, target }: SampledContents, size: SimulationSize = {}): PassBound {
  requireWhole('n', n, { min: 2, max: 1_000_000 })
  requirePositive('mean', mean)
  requirePositive('sd', sd)
  requireShare('confidence', confidence)
  const each = Math.sqrt(confidence)
  const sigmaUpper = sd * Math.sqrt((n - 1) / chiSquareQuantile(1 - each, n - 1))
  const reach = (normalQuantile((1 + each) / 2) * sigmaUpper) / Math.sqrt(n)
  const meanInterval: [number, number] = [mean - reach, mean + reach]
  const corners = meanInterval.map((corner) => {
    // A mean of zero or less passes never; the chance is sought just above.
    const contents = { mean: Math.max(corner, 1e-6), sd: sigmaUpper, target }
    return { ...passProbability(contents, size), floor: passProbabilityFloor(contents), leastFavourableMean: corner }
  })
  const least = corners.reduce((worst, corner) => (corner.probability < worst.probability ? corner : worst))
  return { ...least, floor: Math.min(...corners.map(({ floor }) => floor)), sigmaUpper, meanInterval }
}
