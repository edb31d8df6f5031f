import fc from 'fast-check'
import { expect, test } from 'vitest'
import { medianOf, selectInPlace } from '#shared/statistics/selection.ts'

// Few different values, so that ties are the rule.
const withTies = fc.array(fc.integer({ min: 0, max: 12 }), { minLength: 1, maxLength: 400 })

test('the value of every rank is the one that sorting would put there', () => {
  fc.assert(
    fc.property(withTies, fc.nat(), (values, seed) => {
      const rank = seed % values.length
      const sorted = Float64Array.from(values).sort()
      expect(selectInPlace(Float64Array.from(values), rank)).toBe(sorted[rank])
    }),
  )
})

test('the median is the middle of the sorted values, or half way between the two in the middle', () => {
  fc.assert(
    fc.property(fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true }), { minLength: 1, maxLength: 300 }), (values) => {
      const sorted = Float64Array.from(values).sort()
      const middle = values.length >> 1
      const wanted = values.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2
      expect(medianOf(values)).toBeCloseTo(wanted, 8)
    }),
  )
})

test('the median of a sorted, a reversed and an organ-pipe list is found in linear time', () => {
  const count = 200_001
  const rising = Float64Array.from({ length: count }, (_, i) => i)
  const pipe = Float64Array.from({ length: count }, (_, i) => Math.min(i, count - i))
  expect(medianOf(rising)).toBe(100_000)
  expect(medianOf(rising.toReversed())).toBe(100_000)
  expect(medianOf(pipe)).toBe(pipe.toSorted()[100_000])
})
