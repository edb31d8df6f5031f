import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { flattenSubgroups, momentsOfSubgroups, subgroupsOfSize, summariseSubgroups } from '#shared/statistics/subgroups.ts'
import { mergeMoments, momentsOf, summarise } from '#shared/statistics/summary.ts'
import { equalSubgroups, unequalSubgroups } from './subgroup-arbitraries.ts'

const columnsOf = (subgroups: number[][]) => summariseSubgroups(flattenSubgroups(subgroups))

describe('subgroups are refused', () => {
  test.each([
    ['none at all', [], 'too-few-values', 'subgroups'],
    ['an empty one', [[350], []], 'too-few-values', 'subgroups[1]'],
    ['NaN first', [[NaN, 350]], 'not-finite', 'subgroups[0][0]'],
    [
      'NaN later',
      [
        [350, 351],
        [350, NaN, 352],
      ],
      'not-finite',
      'subgroups[1][1]',
    ],
    ['infinity', [[350, -Infinity]], 'not-finite', 'subgroups[0][1]'],
    ['both infinities', [[Infinity, -Infinity]], 'not-finite', 'subgroups[0][0]'],
    ['a value whose square is too large', [[1e151, 0]], 'out-of-range', 'subgroups[0]'],
  ])('%s', (_name, subgroups, code, argument) => {
    expect(() => columnsOf(subgroups)).toThrow(expect.objectContaining({ code, argument }))
  })

  test('a remainder that does not fill a subgroup', () => {
    expect(() => subgroupsOfSize(new Float64Array(11), 5)).toThrow(expect.objectContaining({ code: 'lengths-differ', argument: 'values' }))
  })
})

test('each subgroup has the figures of its own summary', () => {
  fc.assert(
    fc.property(unequalSubgroups, (subgroups) => {
      const columns = columnsOf(subgroups)
      subgroups.forEach((subgroup, i) => {
        const { n, mean, sd, range, min, max } = summarise(subgroup)
        expect([columns.n[i], columns.range[i], columns.min[i], columns.max[i]]).toEqual([n, range, min, max])
        expect(columns.mean[i]).toBeCloseTo(mean, 11)
        expect(columns.sd[i]).toBeCloseTo(sd, 11)
      })
    }),
  )
})

test('one column cut to size gives what the subgroups give', () => {
  fc.assert(
    fc.property(equalSubgroups({ size: 5 }), (subgroups) => {
      expect(summariseSubgroups(subgroupsOfSize(Float64Array.from(subgroups.flat()), 5))).toEqual(columnsOf(subgroups))
    }),
  )
})

test('a single value has a range of zero and no standard deviation', () => {
  const { n, mean, sd, range } = columnsOf([[350.1]])
  expect([n[0], mean[0], sd[0], range[0]]).toEqual([1, 350.1, NaN, 0])
})

test('the mean of equal values is that value, to the last bit', () => {
  fc.assert(
    fc.property(fc.double({ min: 0.001, max: 1e6, noNaN: true }), fc.integer({ min: 1, max: 60 }), (value, n) => {
      expect(columnsOf([Array.from({ length: n }, () => value)]).mean[0]).toBe(value)
    }),
  )
})

test('the subgroups together have the moments of all values, which are also those of merging one by one', () => {
  fc.assert(
    fc.property(unequalSubgroups, (subgroups) => {
      const together = momentsOfSubgroups(columnsOf(subgroups))
      const [first = momentsOf([0]), ...rest] = subgroups.map((subgroup) => momentsOf(subgroup))
      for (const other of [momentsOf(subgroups.flat()), rest.reduce(mergeMoments, first)]) {
        expect(together).toMatchObject({ n: other.n, min: other.min, max: other.max })
        expect(together.mean).toBeCloseTo(other.mean, 9)
        expect(together.sumOfSquares).toBeCloseTo(other.sumOfSquares, 6)
      }
    }),
  )
})
