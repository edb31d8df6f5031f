import fc from 'fast-check'
import { expect, test } from 'vitest'
import { c4, d2 } from '#shared/statistics/control-factors.ts'
import { estimateSigma, ESTIMATORS, type Estimator } from '#shared/statistics/sigma.ts'
import { flattenSubgroups, summariseSubgroups } from '#shared/statistics/subgroups.ts'
import { summarise } from '#shared/statistics/summary.ts'
import { singleValues, unequalSubgroups } from './subgroup-arbitraries.ts'

function sigmaOf(estimator: Estimator, subgroups: number[][], leftOut?: Uint8Array): number {
  const columns = summariseSubgroups(flattenSubgroups(subgroups))
  return estimateSigma(estimator, columns, { from: 0, to: subgroups.length, leftOut })
}

const meanOf = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length

test('ranges, SDs and pooled SD follow their formulas, written out plainly', () => {
  fc.assert(
    fc.property(unequalSubgroups, (subgroups) => {
      const figures = subgroups.map((subgroup) => summarise(subgroup))
      const pooled = Math.sqrt(
        figures.reduce((sum, { n, variance }) => sum + (n - 1) * variance, 0) / figures.reduce((sum, { n }) => sum + n - 1, 0),
      )
      expect(sigmaOf('rbar', subgroups)).toBeCloseTo(meanOf(figures.map(({ n, range }) => range / d2(n))), 9)
      expect(sigmaOf('sbar', subgroups)).toBeCloseTo(meanOf(figures.map(({ n, sd }) => sd / c4(n))), 9)
      expect(sigmaOf('pooled', subgroups)).toBeCloseTo(pooled, 9)
    }),
  )
})

test('moving ranges follow their formulas, written out plainly', () => {
  fc.assert(
    fc.property(singleValues, (subgroups) => {
      const values = subgroups.flat()
      const ranges = values.slice(1).map((value, i) => Math.abs(value - values[i]!))
      const sorted = ranges.toSorted((a, b) => a - b)
      const median = (sorted[(sorted.length - 1) >> 1]! + sorted[sorted.length >> 1]!) / 2
      expect(sigmaOf('moving-range', subgroups)).toBeCloseTo((meanOf(ranges) * Math.sqrt(Math.PI)) / 2, 9)
      expect(sigmaOf('median-moving-range', subgroups)).toBeCloseTo(median / 0.9538725524, 8)
    }),
  )
})

test('every estimator finds the sigma that normal values were drawn with', () => {
  const normal = seededNormal(77)
  const single = Array.from({ length: 40_000 }, () => [350 + 4 * normal()])
  const grouped = Array.from({ length: 8_000 }, () => Array.from({ length: 5 }, () => 350 + 4 * normal()))
  for (const estimator of ESTIMATORS) {
    expect(Math.abs(sigmaOf(estimator, estimator.includes('moving') ? single : grouped) - 4), estimator).toBeLessThan(0.06)
  }
})

test('a point left out takes both its moving ranges with it', () => {
  const subgroups = [[1], [2], [90], [4], [6]]
  expect(sigmaOf('moving-range', subgroups, Uint8Array.of(0, 0, 1, 0, 0)) * d2(2)).toBeCloseTo((1 + 2) / 2, 12)
})

test('what cannot be estimated is none, not zero', () => {
  expect(sigmaOf('moving-range', [[350]])).toBeNaN()
  expect(sigmaOf('median-moving-range', [[350]])).toBeNaN()
  expect(sigmaOf('pooled', [[350], [351]])).toBeNaN()
  expect(sigmaOf('rbar', [[350, 351]], Uint8Array.of(1))).toBeNaN()
})

function seededNormal(seed: number): () => number {
  let state = seed
  const uniform = (): number => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0
    return (state + 0.5) / 2 ** 32
  }
  return () => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform())
}
