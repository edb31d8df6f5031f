import fc from 'fast-check'
import { expect, test } from 'vitest'
import { controlFactors } from '#shared/statistics/control-factors.ts'
import { controlChart, type Line } from '#shared/statistics/control-chart.ts'
import { summarise } from '#shared/statistics/summary.ts'
import { equalSubgroups, singleValues, unequalSubgroups } from '../subgroup-arbitraries.ts'

// Each chart once more by another formula, written out plainly.

const meanOf = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length

function expectClose(got: Line | undefined, want: number[], digits = 8): void {
  const list = Array.isArray(got) ? got : want.map(() => got ?? null)
  expect(list).toHaveLength(want.length)
  want.forEach((value, point) => expect(list[point]).toBeCloseTo(value, digits))
}

test('means and ranges: the limits by the factors A2, D3 and D4', () => {
  fc.assert(
    fc.property(fc.integer({ min: 2, max: 12 }), fc.nat(), (size, seed) => {
      const [subgroups = []] = fc.sample(equalSubgroups({ size }), { numRuns: 1, seed })
      const { A2, D3, D4 } = controlFactors(size)
      const center = meanOf(subgroups.flat())
      const range = meanOf(subgroups.map((subgroup) => summarise(subgroup).range))
      const { location, spread } = controlChart({ chart: 'xbar-r', subgroups })
      const every = (value: number) => subgroups.map(() => value)
      expectClose(location.center, every(center))
      expectClose(location.lower, every(center - A2 * range))
      expectClose(location.upper, every(center + A2 * range))
      expectClose(spread?.lower, every(D3 * range))
      expectClose(spread?.center, every(range))
      expectClose(spread?.upper, every(D4 * range))
    }),
  )
})

test('means and standard deviations: the limits by the factors A3, B3 and B4, and B5, B6 for a known sigma', () => {
  fc.assert(
    fc.property(fc.integer({ min: 2, max: 12 }), fc.nat(), (size, seed) => {
      const [subgroups = []] = fc.sample(equalSubgroups({ size }), { numRuns: 1, seed })
      const { A3, B3, B4, B5, B6 } = controlFactors(size)
      const center = meanOf(subgroups.flat())
      const sd = meanOf(subgroups.map((subgroup) => summarise(subgroup).sd))
      const every = (value: number) => subgroups.map(() => value)
      const estimated = controlChart({ chart: 'xbar-s', subgroups })
      expectClose(estimated.location.upper, every(center + A3 * sd))
      expectClose(estimated.spread?.lower, every(B3 * sd))
      expectClose(estimated.spread?.upper, every(B4 * sd))
      const known = controlChart({ chart: 'xbar-s', subgroups, target: 350, sigma: 4 })
      expectClose(known.location.lower, every(350 - 12 / Math.sqrt(size)))
      expectClose(known.spread?.lower, every(B5 * 4))
      expectClose(known.spread?.upper, every(B6 * 4))
    }),
  )
})

test('single values: the limits by the factors E2 and D4', () => {
  fc.assert(
    fc.property(singleValues, (subgroups) => {
      const values = subgroups.flat()
      const ranges = values.slice(1).map((value, i) => Math.abs(value - values[i]!))
      const { E2, D4 } = controlFactors(2)
      const { location, spread } = controlChart({ chart: 'individuals', subgroups })
      expectClose(
        location.upper,
        values.map(() => meanOf(values) + E2 * meanOf(ranges)),
      )
      expectClose(
        spread?.upper,
        values.map(() => D4 * meanOf(ranges)),
      )
      expect(spread?.points[0]).toBeNull()
      expectClose(spread?.points.slice(1), ranges)
    }),
  )
})

test('weighted means: every weight written out, its variance summed term by term, for any sizes', () => {
  fc.assert(
    fc.property(unequalSubgroups, fc.double({ min: 0.05, max: 1, noNaN: true }), (subgroups, lambda) => {
      const target = 350
      const sigma = 5
      const weightsAt = (point: number) => subgroups.slice(0, point + 1).map((_, i) => lambda * (1 - lambda) ** (point - i))
      const points = subgroups.map((_, point) => {
        const weights = weightsAt(point)
        return (1 - lambda) ** (point + 1) * target + weights.reduce((sum, weight, i) => sum + weight * meanOf(subgroups[i]!), 0)
      })
      const upper = subgroups.map((_, point) => {
        const variance = weightsAt(point).reduce((sum, weight, i) => sum + (weight * weight * sigma * sigma) / subgroups[i]!.length, 0)
        return target + 2.7 * Math.sqrt(variance)
      })
      const { location } = controlChart({ chart: 'ewma', subgroups, target, sigma, ewma: { lambda, width: 2.7 } })
      expectClose(location.points, points)
      expectClose(location.upper, upper)
    }),
  )
})

test('a weighted mean that keeps nothing of the past is the chart of means', () => {
  fc.assert(
    fc.property(unequalSubgroups, (subgroups) => {
      const weighted = controlChart({ chart: 'ewma', subgroups, target: 350, sigma: 5, ewma: { lambda: 1, width: 3 } })
      const means = controlChart({ chart: 'xbar-s', subgroups, target: 350, sigma: 5 })
      expectClose(weighted.location.upper, means.location.upper.map(Number))
      expectClose(weighted.location.points, means.location.points.map(Number))
    }),
  )
})

/** The highest a walk stands above its lowest point so far: what the recursion of a cumulative sum works out step by step. */
function climbAbovePast(steps: number[]): number[] {
  return steps.map((_, point) => {
    const tails = steps.slice(0, point + 1).map((__, from) => steps.slice(from, point + 1).reduce((sum, step) => sum + step, 0))
    return Math.max(0, ...tails)
  })
}

test('cumulative sums: the best tail of all, without the recursion', () => {
  fc.assert(
    fc.property(equalSubgroups({ size: 4 }), fc.double({ min: 0, max: 2, noNaN: true }), (subgroups, k) => {
      const sigmaOfMean = 20 / 2
      const distances = subgroups.map((subgroup) => meanOf(subgroup) - 350)
      const { location } = controlChart({ chart: 'cusum', subgroups, target: 350, sigma: 20, cusum: { k, h: 4, headStart: 0 } })
      expectClose(location.upperSums, climbAbovePast(distances.map((distance) => distance - k * sigmaOfMean)))
      expectClose(location.lowerSums, climbAbovePast(distances.map((distance) => -distance - k * sigmaOfMean)))
      expect(location.decision).toBe(4 * sigmaOfMean)
    }),
  )
})

test('cumulative sums of sizes that differ are those of the means in sigmas', () => {
  fc.assert(
    fc.property(unequalSubgroups, (subgroups) => {
      const sigmas = subgroups.map((subgroup) => 20 / Math.sqrt(subgroup.length))
      const steps = subgroups.map((subgroup, i) => (meanOf(subgroup) - 350) / sigmas[i]! - 0.5)
      const { location } = controlChart({ chart: 'cusum', subgroups, target: 350, sigma: 20, cusum: { k: 0.5, h: 4, headStart: 0 } })
      expectClose(
        location.upperSums,
        climbAbovePast(steps).map((sum, i) => sum * sigmas[i]!),
        7,
      )
      expectClose(
        location.decision,
        sigmas.map((sigma) => 4 * sigma),
      )
    }),
  )
})

test('a cumulative sum signals exactly where one of its sums is above the decision value, and is drawn on that side', () => {
  fc.assert(
    fc.property(equalSubgroups({ size: 3 }), (subgroups) => {
      const { location, signals } = controlChart({ chart: 'cusum', subgroups, target: 350, sigma: 10, cusum: { h: 3, headStart: 1.5 } })
      const { upperSums = [], lowerSums = [], decision } = location
      const beyond = subgroups.flatMap((_, i) => (Math.max(upperSums[i] ?? 0, lowerSums[i] ?? 0) > Number(decision) ? [i] : []))
      expect(signals.map(({ point }) => point)).toEqual(beyond)
      location.points.forEach((sum, i) => expect([upperSums[i], -(lowerSums[i] ?? 0)]).toContain(sum))
    }),
  )
})

test('between and within: the means are a chart of single values, the ranges those of means and ranges', () => {
  fc.assert(
    fc.property(equalSubgroups({ size: 5 }), (subgroups) => {
      const answer = controlChart({ chart: 'between-within', subgroups })
      const means = controlChart({ chart: 'individuals', subgroups: subgroups.map((subgroup) => [meanOf(subgroup)]) })
      const ranges = controlChart({ chart: 'xbar-r', subgroups })
      expectClose(answer.location.lower, means.location.lower.map(Number))
      expectClose(answer.between?.upper, (means.spread?.upper ?? []).map(Number))
      expect(answer.spread?.upper).toEqual(ranges.spread?.upper)
      const { sigmaOfMeans = 0, sigmaWithin, sigmaBetween } = answer.phases[0]!
      expect(sigmaBetween).toBeCloseTo(Math.sqrt(Math.max(0, (sigmaOfMeans ?? 0) ** 2 - (sigmaWithin ?? 0) ** 2 / 5)), 9)
    }),
  )
})
