import fc from 'fast-check'
import { expect, test } from 'vitest'
import { CHART_IDS } from '#shared/statistics/charts/index.ts'
import { operatingCharacteristic } from '#shared/statistics/operating-characteristic.ts'
import { passBound } from '#shared/statistics/pass-bound.ts'
import { acceptanceValueProbability, passProbability, passProbabilityFloor } from '#shared/statistics/pass-probability.ts'
import { averageRunLength } from '#shared/statistics/run-length.ts'
import { judgeUniformity } from '#shared/trade/standards/index.ts'
import { adviseTuning } from '#shared/trade/tuning-advice.ts'

const any = fc.double({ noNaN: true, noDefaultInfinity: true })
const usual = fc.double({ min: -20, max: 500, noNaN: true })
const number = fc.oneof(any, usual)
const list = (size: number) => fc.array(number, { minLength: size, maxLength: size })

// The first case found is told as it is: making it smaller would take minutes, since each try is a whole calculation.
const once = { endOnFailure: true }

function everyNumber(value: unknown): number[] {
  if (typeof value === 'number') return [value]
  return typeof value === 'object' && value !== null ? Object.values(value).flatMap(everyNumber) : []
}

/** The promise of every function: finite figures, or a refusal that names what is wrong. */
function keepsThePromise(calculate: () => unknown): void {
  let answer: unknown
  try {
    answer = calculate()
  } catch (error) {
    expect(error).toMatchObject({ name: 'StatisticsError' })
    return
  }
  expect(everyNumber(answer).filter((figure) => !Number.isFinite(figure))).toEqual([])
}

test('acceptance', () => {
  const request = fc.oneof(
    fc.record({ standard: fc.constant('usp-905' as const), contents: fc.oneof(list(10), list(30)), target: number }),
    fc.record({ standard: fc.constant('usp-905-weight' as const), weights: list(10), assayPercent: number, claimMg: number }),
    fc.record({ standard: fc.constant('usp-2091' as const), gross: list(20), shells: list(20) }),
    fc.record({ standard: fc.constant('ph-eur-2.9.5' as const), net: list(20) }),
  )
  fc.assert(
    fc.property(request, (each) => keepsThePromise(() => judgeUniformity(each))),
    { ...once, numRuns: 400 },
  )
})

test('chances', () => {
  const size = { lots: 100 }
  fc.assert(
    fc.property(number, number, fc.option(number, { nil: undefined }), (mean, sd, target) => {
      keepsThePromise(() => passProbability({ mean, sd, target }, size))
      keepsThePromise(() => acceptanceValueProbability({ mean, sd, target }, 1))
      keepsThePromise(() => passProbabilityFloor({ mean, sd, target }))
      keepsThePromise(() => passBound({ n: 30, mean, sd, confidence: 0.95, target }, size))
    }),
    { ...once, numRuns: 200 },
  )
})

test('run lengths', () => {
  const request = fc.record({
    chart: fc.constantFrom(...CHART_IDS),
    n: fc.integer({ min: 1, max: 1000 }),
    shiftSigma: number,
    betweenSigma: fc.oneof(fc.constant(0), number),
    tests: fc.subarray([1, 2, 5, 6, 7, 8], { minLength: 1 }),
  })
  fc.assert(
    fc.property(request, (each) => keepsThePromise(() => averageRunLength(each))),
    { ...once, numRuns: 150 },
  )
})

test('control plans', () => {
  const plan = fc.record({ intervalMinutes: number, capsulesPerHour: number, sigmaMg: number, betweenSigmaMg: number })
  fc.assert(
    fc.property(plan, number, (each, shiftMg) => {
      keepsThePromise(() => operatingCharacteristic({ chart: 'xbar-s', n: 20, ...each }, [{ shiftMg }]))
    }),
    { ...once, numRuns: 150 },
  )
})

test('tuning advice', () => {
  const trial = fc.record({
    settings: fc.record({ 'penetration-4': number, 'disc-thickness': number }),
    meanMg: number,
    sdMg: number,
    n: fc.integer({ min: 2, max: 100 }),
  })
  fc.assert(
    fc.property(fc.array(trial, { minLength: 1, maxLength: 5 }), number, (history, target) => {
      keepsThePromise(() => adviseTuning({ history, target }))
    }),
    { ...once, numRuns: 200 },
  )
})
