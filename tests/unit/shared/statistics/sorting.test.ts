import fc from 'fast-check'
import { expect, test } from 'vitest'
import { sortedCopy } from '#shared/statistics/sorting.ts'

/** Long enough to be sorted by counting: a short list said over and over, with a step each time so that few values are equal. */
function stretched(values: number[], step: number): Float64Array {
  return Float64Array.from({ length: 5000 }, (_, i) => values[i % values.length]! + step * ((i * 7919) % 5000))
}

test('any finite doubles come out as the typed array’s own sort puts them, zeros and signs included', () => {
  const doubles = fc.array(fc.double({ noNaN: true, noDefaultInfinity: true }), { minLength: 5000, maxLength: 5200 })
  fc.assert(
    fc.property(doubles, (values) => {
      const sorted = sortedCopy(values)
      expect(sorted.every((value, i, all) => i === 0 || all[i - 1]! <= value)).toBe(true)
      expect(sorted).toEqual(Float64Array.from(values).sort())
    }),
    { numRuns: 20 },
  )
})

test('weights, negatives, tiny and huge values, and lists of any length', () => {
  const anyList = fc.array(fc.constantFrom(350.1, -350.1, 0, -0, 1e-310, -1e-310, 1e300, -1e300, 349.9), { minLength: 1, maxLength: 30 })
  fc.assert(
    fc.property(anyList, fc.constantFrom(0, 0.1, -2.5), (values, step) => {
      expect(sortedCopy(values)).toEqual(Float64Array.from(values).sort())
      const long = stretched(values, step)
      const before = long.slice()
      expect(sortedCopy(long)).toEqual(long.toSorted())
      expect(long).toEqual(before)
    }),
    { numRuns: 40 },
  )
})

test('nothing to sort is nothing', () => {
  expect(sortedCopy([])).toEqual(new Float64Array(0))
})
