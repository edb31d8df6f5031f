import fc from 'fast-check'
import { expect, test } from 'vitest'
import { normalLogCumulative } from '#shared/statistics/distributions/normal-log.ts'
import { normalCumulative } from '#shared/statistics/distributions/normal.ts'

test('it is the logarithm of the area wherever the area fits a number', () => {
  fc.assert(
    fc.property(fc.double({ min: -36, max: 36, noNaN: true }), (z) => {
      const want = Math.log(normalCumulative(z))
      expect(Math.abs(normalLogCumulative(z) - want)).toBeLessThanOrEqual(2e-13 + 1e-12 * Math.abs(want))
    }),
    { numRuns: 5000 },
  )
})

test('its halves are joined without a step', () => {
  for (const border of [-35, -8, 8]) {
    expect(normalLogCumulative(border + 1e-9)).toBeCloseTo(normalLogCumulative(border - 1e-9), 6)
  }
})

test('it rises, and is finite and at most zero however far out', () => {
  const far = fc.double({ min: -1e150, max: 1e150, noNaN: true })
  fc.assert(
    fc.property(fc.oneof(far, fc.double({ min: -40, max: 40, noNaN: true })), fc.double({ min: 0.01, max: 5, noNaN: true }), (z, step) => {
      const value = normalLogCumulative(z)
      expect(Number.isFinite(value)).toBe(true)
      expect(value).toBeLessThanOrEqual(0)
      expect(normalLogCumulative(z + step)).toBeGreaterThanOrEqual(value)
    }),
  )
})
