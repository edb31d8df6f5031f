import fc from 'fast-check'
import { expect, test } from 'vitest'
import { comparePlans, operatingCharacteristic, type WatchPlan } from '#shared/statistics/operating-characteristic.ts'
import { averageRunLength } from '#shared/statistics/run-length.ts'

const plan: WatchPlan = { chart: 'xbar-s', n: 20, intervalMinutes: 30, capsulesPerHour: 57_600, sigmaMg: 8, tests: [1] }

test('a shift of one sigma of the mean, counted by hand', () => {
  const shiftMg = 8 / Math.sqrt(20)
  const { changes, unchanged } = operatingCharacteristic(plan, [{ shiftMg }])
  expect(unchanged.averageRunLength).toBeCloseTo(370.398, 2)
  expect(unchanged.averageMinutes).toBeCloseTo(370.398 * 30, 0)
  expect(changes[0]?.averageRunLength).toBeCloseTo(43.895, 2)
  expect(changes[0]?.averageMinutes).toBeCloseTo(43.395 * 30, 1)
  expect(changes[0]?.capsulesMade).toBeCloseTo(43.395 * 28_800, -2)
  expect(changes[0]?.capsulesWeighed).toBeCloseTo(43.895 * 20, 1)
})

test('a large shift is seen at the first sample', () => {
  const [change] = operatingCharacteristic(plan, [{ shiftMg: 30 }]).changes
  expect(change?.samplesFor95).toBe(1)
  expect(change?.averageMinutes).toBeCloseTo(15, 6)
  expect(change?.capsulesMade).toBeCloseTo(14_400, 3)
})

test('the chance within one sample is one over the run length when only test 1 watches', () => {
  fc.assert(
    fc.property(fc.double({ min: 0, max: 10, noNaN: true }), (shiftMg) => {
      const [change] = operatingCharacteristic(plan, [{ shiftMg }]).changes
      expect(change!.seenWithin[0]! * change!.averageRunLength).toBeCloseTo(1, 8)
    }),
    { numRuns: 20 },
  )
})

test('a drift in mg an hour is the drift in sigmas a sample', () => {
  const [change] = operatingCharacteristic(plan, [{ driftMgPerHour: 3.5 }]).changes
  const direct = averageRunLength({ chart: 'xbar-s', n: 20, shiftSigma: 0, driftSigma: 3.5 / 2 / 8, tests: [1] })
  expect(change?.averageRunLength).toBe(direct.averageRunLength)
  expect(change?.averageMinutes).toBeCloseTo(direct.averageRunLength * 30, 9)
})

test('limits that know only the spread within samples cry wolf when samples differ', () => {
  const { unchanged } = operatingCharacteristic({ ...plan, betweenSigmaMg: 3 }, [{ shiftMg: 5 }])
  expect(unchanged.falseAlarmsPer100Samples).toBeGreaterThan(10)
  const honest = operatingCharacteristic({ ...plan, chart: 'between-within', betweenSigmaMg: 3 }, [{ shiftMg: 5 }])
  expect(honest.unchanged.falseAlarmsPer100Samples).toBeCloseTo(0.27, 3)
})

test('options: more capsules a sample see sooner, shorter intervals make less product in the dark', () => {
  const options = [
    { n: 10, intervalMinutes: 30 },
    { n: 20, intervalMinutes: 30 },
    { n: 10, intervalMinutes: 15 },
  ]
  const [small, large, often] = comparePlans(plan, { shiftMg: 5 }, options)
  expect(large!.changes[0]!.averageRunLength).toBeLessThan(small!.changes[0]!.averageRunLength)
  expect(often!.changes[0]!.capsulesMade).toBeCloseTo(small!.changes[0]!.capsulesMade / 2, 6)
  expect(often!.weighedPerHour).toBe(40)
})

test.each([
  [{ ...plan, intervalMinutes: 0 }, [{ shiftMg: 1 }], 'not-positive', 'intervalMinutes'],
  [{ ...plan, sigmaMg: -1 }, [{ shiftMg: 1 }], 'not-positive', 'sigmaMg'],
  [plan, [], 'too-few-values', 'changes'],
  [plan, new Array(21).fill({ shiftMg: 1 }), 'too-many-values', 'changes'],
  [plan, [{ shiftMg: Infinity }], 'not-finite', 'changes[0].shiftMg'],
])('refuses what cannot be judged (%#)', (each, changes, code, argument) => {
  expect(() => operatingCharacteristic(each, changes)).toThrow(expect.objectContaining({ code, argument }))
})

test('refuses an empty list of options', () => {
  expect(() => comparePlans(plan, { shiftMg: 1 }, [])).toThrow(expect.objectContaining({ argument: 'options' }))
})
