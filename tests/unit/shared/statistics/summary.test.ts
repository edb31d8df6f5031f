import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { StatisticsError } from '#shared/statistics/errors.ts'
import { mergeMoments, momentsOf, summarise } from '#shared/statistics/summary.ts'

const weights = fc.array(fc.double({ min: 1, max: 5000, noNaN: true }), { minLength: 2, maxLength: 200 })

/** The exact variance of whole numbers, by rational arithmetic: another formula in another number system. */
function exactVariance(values: number[]): number {
  const n = BigInt(values.length)
  const whole = values.map((value) => BigInt(value))
  const sum = whole.reduce((total, value) => total + value, 0n)
  const squares = whole.reduce((total, value) => total + value * value, 0n)
  const scaled = ((n * squares - sum * sum) * 10n ** 20n) / (n * (n - 1n))
  return Number(scaled) / 1e20
}

describe('summarise refuses', () => {
  test.each([
    [[], 'too-few-values', 'values'],
    [[350], 'too-few-values', 'values'],
    [[350, NaN], 'not-finite', 'values[1]'],
    [[Infinity, 350], 'not-finite', 'values[0]'],
    [[1e200, -1e200], 'out-of-range', 'values'],
    [[1.7e308, -1.7e308], 'out-of-range', 'values'],
  ])('%j', (values, code, argument) => {
    expect(() => summarise(values)).toThrow(expect.objectContaining({ code, argument }))
  })
})

test('mean and variance of whole numbers agree with exact rational arithmetic, however large they are', () => {
  const whole = fc.tuple(
    fc.integer({ min: -1e12, max: 1e12 }),
    fc.array(fc.integer({ min: -1000, max: 1000 }), { minLength: 2, maxLength: 300 }),
  )
  fc.assert(
    fc.property(whole, ([offset, steps]) => {
      const values = steps.map((step) => offset + step)
      const { mean, variance } = summarise(values)
      const exactMean = offset + steps.reduce((sum, step) => sum + step, 0) / steps.length
      expect(Math.abs(mean - exactMean)).toBeLessThanOrEqual(1e-15 * Math.abs(exactMean) + 1e-12)
      expect(Math.abs(variance - exactVariance(values))).toBeLessThanOrEqual(1e-11 * exactVariance(values))
    }),
  )
})

test.each([
  ['1000000.2 and 1000000.1, 1000000.3 in turn', 1_000_000, 1e-9],
  ['10000000.2 and 10000000.1, 10000000.3 in turn', 10_000_000, 1e-8],
])('the hardest certified sets, %s, keep eight digits of their SD', (_name, whole, tolerance) => {
  const values = [whole + 0.2]
  for (let pair = 0; pair < 500; pair++) values.push(whole + 0.1, whole + 0.3)
  const { mean, sd } = summarise(values)
  expect(Math.abs(mean / (whole + 0.2) - 1)).toBeLessThan(1e-15)
  // Read as doubles the second set has an SD of its own, 5.6e-8 away from the certified 0.1.
  const asDoubles = Math.sqrt(([0.1, 0.3].reduce((sum, part) => sum + (whole + part - mean) ** 2, 0) * 500) / 1000)
  expect(Math.abs(sd / asDoubles - 1)).toBeLessThan(tolerance)
})

test('the order of the values does not matter', () => {
  fc.assert(
    fc.property(weights, (values) => {
      const one = summarise(values)
      const other = summarise(values.toReversed())
      expect(other).toMatchObject({ n: one.n, min: one.min, max: one.max, range: one.range, median: one.median })
      expect(other.mean).toBeCloseTo(one.mean, 10)
      expect(other.sd).toBeCloseTo(one.sd, 9)
    }),
  )
})

test('a shift moves mean, median and ends and leaves the spread; a scale multiplies them all', () => {
  fc.assert(
    fc.property(weights, fc.integer({ min: -1000, max: 1000 }), fc.double({ min: 0.01, max: 100, noNaN: true }), (values, shift, scale) => {
      const plain = summarise(values)
      const shifted = summarise(values.map((value) => value + shift))
      const scaled = summarise(values.map((value) => value * scale))
      expect(shifted.mean).toBeCloseTo(plain.mean + shift, 8)
      expect(shifted.median).toBeCloseTo(plain.median + shift, 8)
      expect(shifted.sd).toBeCloseTo(plain.sd, 7)
      expect(scaled.mean / (plain.mean * scale)).toBeCloseTo(1, 10)
      expect(scaled.sd).toBeCloseTo(plain.sd * scale, 6)
      expect(scaled.rsdPercent).toBeCloseTo(plain.rsdPercent ?? NaN, 7)
    }),
  )
})

test('every figure of equal values is exact', () => {
  fc.assert(
    fc.property(fc.double({ min: 0.001, max: 1e6, noNaN: true }), fc.integer({ min: 2, max: 500 }), (value, n) => {
      const { mean, sd, range, median, rsdPercent } = summarise(new Float64Array(n).fill(value))
      expect({ sd, range, median, rsdPercent }).toEqual({ sd: 0, range: 0, median: value, rsdPercent: 0 })
      expect(mean).toBe(value)
    }),
  )
})

test('merging summaries equals summarising the merge', () => {
  fc.assert(
    fc.property(weights, weights, (first, second) => {
      const merged = mergeMoments(momentsOf(first), momentsOf(second))
      const together = momentsOf([...first, ...second])
      expect(merged).toMatchObject({ n: together.n, min: together.min, max: together.max })
      expect(merged.mean).toBeCloseTo(together.mean, 9)
      expect(Math.abs(merged.sumOfSquares - together.sumOfSquares)).toBeLessThanOrEqual(1e-10 * together.sumOfSquares + 1e-9)
    }),
  )
})

test('finite values give finite figures or a typed refusal, and are left as they were', () => {
  fc.assert(
    fc.property(fc.array(fc.double({ noNaN: true, noDefaultInfinity: true }), { minLength: 2, maxLength: 50 }), (values) => {
      const before = [...values]
      try {
        const { rsdPercent, ...figures } = summarise(values)
        expect(Object.values(figures).every(Number.isFinite)).toBe(true)
        expect(rsdPercent === null || Number.isFinite(rsdPercent)).toBe(true)
        expect(figures.min).toBeLessThanOrEqual(figures.median)
        expect(figures.median).toBeLessThanOrEqual(figures.max)
        expect(figures.sd).toBeGreaterThanOrEqual(0)
      } catch (error) {
        if (!(error instanceof StatisticsError)) throw error
        expect(error.code).toBe('out-of-range')
      }
      expect(values).toEqual(before)
    }),
  )
})

test('the relative SD is taken of the size of the mean, and there is none of a mean of zero', () => {
  expect(summarise([-2, -4]).rsdPercent).toBeCloseTo((100 * Math.SQRT2) / 3, 12)
  expect(summarise([-1, 1]).rsdPercent).toBeNull()
})
