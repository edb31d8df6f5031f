import fc from 'fast-check'
import { Matrix, solve } from 'ml-matrix'
import { describe, expect, test } from 'vitest'
import type { Panel } from '#shared/statistics/charts/panel.ts'
import { normalCumulative } from '#shared/statistics/distributions/normal.ts'
import { normalDraws } from '#shared/statistics/normal-draws.ts'
import { seededRandom } from '#shared/statistics/random.ts'
import { averageRunLength, chanceSeenWithin } from '#shared/statistics/run-length.ts'
import { gaussLegendre } from '#shared/statistics/run-length/gauss-legendre.ts'
import { cusumWatcher, pointWatcher, simulateRunLength, type Watcher } from '#shared/statistics/run-length/simulated-runs.ts'
import { buildZoneAutomaton } from '#shared/statistics/run-length/zone-automaton.ts'
import { zoneChances } from '#shared/statistics/run-length/zone-run-length.ts'
import { chooseTests } from '#shared/statistics/run-tests/find-signals.ts'

const NUMBERS = [1, 2, 3, 4, 5, 6, 7, 8]

/** The first point at which the tests of the charts signal, over a panel with centre 0 and sigma 1. */
function firstHit(values: number[], tests: number[]): number {
  const of = (value: number) => Float64Array.from(values, () => value)
  const points = Float64Array.from(values)
  const flat = { points, ordered: points, center: of(0), sigma: of(1), lower: of(-3), upper: of(3) }
  // Only what the detectors read is filled in; the names of a panel play no part here.
  const panel = flat as unknown as Panel
  const stretch = { from: 0, to: values.length }
  const hits = chooseTests(tests).flatMap(({ test, length }) => test.detect(panel, stretch, length))
  return Math.min(Infinity, ...hits.map(({ point }) => point))
}

function firstSignal(watcher: Watcher, values: number[]): number {
  watcher.restart()
  const place = values.findIndex((value) => watcher.signals(value))
  return place < 0 ? Infinity : place
}

function watcherOf(tests: number[]): Watcher {
  const chosen = chooseTests(tests)
  const isOrder = (number: number) => number === 3 || number === 4
  const automaton = buildZoneAutomaton(
    chosen.filter(({ test }) => !isOrder(test.number)),
    100_000,
  )
  return pointWatcher(
    automaton!,
    chosen.filter(({ test }) => isOrder(test.number)),
  )
}

describe('the watching of points', () => {
  test.each(NUMBERS)('sees test %i where the chart sees it', (number) => {
    const draw = normalDraws(seededRandom(40 + number))
    const watcher = watcherOf([number])
    let seen = 0
    for (let series = 0; series < 500; series++) {
      // Some series hug the centre, some stand off, some zigzag: every test has its chance.
      const spread = [0.5, 1, 1.6][series % 3]!
      const zigzag = series % 5 === 0 ? 1.5 : 0
      const values = Array.from(
        { length: 60 },
        (_, place) => spread * draw() + (place % 2 === 0 ? zigzag : -zigzag) + (series % 7 === 0 ? 0.8 : 0),
      )
      const expected = firstHit(values, [number])
      if (expected < Infinity) seen++
      expect(firstSignal(watcher, values)).toBe(expected)
    }
    expect(seen).toBeGreaterThan(20)
  })

  test('sees any set of tests together where the chart sees them', () => {
    const value = fc.double({ min: -3.5, max: 3.5, noNaN: true })
    fc.assert(
      fc.property(fc.subarray(NUMBERS, { minLength: 1 }), fc.array(value, { minLength: 5, maxLength: 40 }), (tests, values) => {
        expect(firstSignal(watcherOf(tests), values)).toBe(firstHit(values, tests))
      }),
    )
  })
})

describe('zone tests', () => {
  test.each([[[1, 5]], [[1, 2, 5, 6]], [[1, 7]], [[1, 2, 5, 6, 7, 8]], [[8]]])(
    'the sum of silent shares for tests %j equals the solution of the linear system',
    (tests) => {
      for (const shift of [0, 0.7, 1.5]) {
        const { states, next } = buildZoneAutomaton(chooseTests(tests), 5000)!
        const chances = zoneChances(shift, 1)
        const system = Matrix.eye(states, states)
        next.forEach((target, at) => {
          const state = Math.floor(at / 8)
          if (target >= 0) system.set(state, target, system.get(state, target) - chances[at % 8]!)
        })
        const solved = solve(system, Matrix.ones(states, 1)).get(0, 0)
        const { averageRunLength: got } = averageRunLength({ chart: 'individuals', n: 1, shiftSigma: shift, tests })
        expect(Math.abs(got / solved - 1)).toBeLessThan(1e-8)
      }
    },
  )

  test('zone chances add up to one, also far out', () => {
    fc.assert(
      fc.property(fc.double({ min: -40, max: 40, noNaN: true }), fc.double({ min: 0.1, max: 10, noNaN: true }), (mean, sd) => {
        const chances = zoneChances(mean, sd)
        expect(chances.reduce((sum, chance) => sum + chance, 0)).toBeCloseTo(1, 12)
        expect(Math.min(...chances)).toBeGreaterThanOrEqual(0)
      }),
    )
  })

  test('more tests never see later, up and down are alike, and the size of a sample is that of its shift', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 3, noNaN: true }), fc.integer({ min: 2, max: 30 }), (shift, n) => {
        const run = (tests: number[], shiftSigma: number, size = 1) =>
          averageRunLength({ chart: size === 1 ? 'individuals' : 'xbar-s', n: size, shiftSigma, tests }).averageRunLength
        expect(run([1, 2, 5], shift)).toBeLessThanOrEqual(run([1, 5], shift) + 1e-9)
        expect(run([1, 5, 6], -shift)).toBeCloseTo(run([1, 5, 6], shift), 8)
        expect(run([1, 2], shift / Math.sqrt(n), n)).toBeCloseTo(run([1, 2], shift), 6)
      }),
      { numRuns: 25 },
    )
  })

  test('order tests are simulated, seeded, and agree with the exact figure where they never matter first', () => {
    const request = { chart: 'individuals', n: 1, shiftSigma: 0, tests: [1, 3, 4], seed: 7 } as const
    const answer = averageRunLength(request)
    expect(answer).toEqual(averageRunLength(request))
    expect(answer.method).toBe('simulated')
    expect(answer.averageRunLength).toBeLessThan(370.4)
    const far = averageRunLength({ ...request, shiftSigma: 3 })
    expect(Math.abs(far.averageRunLength - 2)).toBeLessThan(5 * far.standardError!)
  })

  test('test 3 alone: six climbing or falling have the run length of a direct count', () => {
    const draw = normalDraws(seededRandom(99))
    let total = 0
    const runs = 4000
    for (let run = 0; run < runs; run++) {
      const values: number[] = []
      for (let done = false; !done; total++) {
        values.push(draw())
        const last = values.slice(-6)
        const steps = last.slice(1).map((value, place) => Math.sign(value - last[place]!))
        done = last.length === 6 && Math.abs(steps.reduce((sum, step) => sum + step, 0)) === 5
      }
    }
    const { averageRunLength: got } = averageRunLength({ chart: 'individuals', n: 1, shiftSigma: 0, tests: [3] })
    expect(Math.abs(got / (total / runs) - 1)).toBeLessThan(0.08)
  })
})

describe('drift and samples that differ', () => {
  test('the chain under a drift agrees with its simulation', () => {
    const exact = averageRunLength({ chart: 'xbar-r', n: 5, shiftSigma: 0, driftSigma: 0.03, tests: [1, 2, 5, 6] })
    const exposure = { shiftAt: (t: number) => t * 0.03 * Math.sqrt(5), isSteady: false, sd: 1 }
    const simulated = simulateRunLength(watcherOf([1, 2, 5, 6]), exposure, 5)
    expect(exact.method).toBe('exact')
    expect(Math.abs(exact.averageRunLength - simulated.averageRunLength)).toBeLessThan(4 * simulated.standardError)
  })

  test('a difference between samples raises false alarms on limits that do not know it, and only there', () => {
    const request = { n: 20, shiftSigma: 0, betweenSigma: 3 / 8 } as const
    const within = averageRunLength({ ...request, chart: 'xbar-s' }).averageRunLength
    const tail = 2 * normalCumulative(-3 / Math.sqrt(1 + 20 * (3 / 8) ** 2))
    expect(within).toBeCloseTo(1 / tail, 6)
    expect(within).toBeLessThan(10)
    expect(averageRunLength({ ...request, chart: 'between-within' }).averageRunLength).toBeCloseTo(370.398, 2)
  })
})

describe('EWMA', () => {
  test('with λ = 1 it is a plain chart with limits at its width', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 3, noNaN: true }), fc.double({ min: 1, max: 3.3, noNaN: true }), (shiftSigma, width) => {
        const { averageRunLength: got } = averageRunLength({ chart: 'ewma', n: 1, shiftSigma, ewma: { lambda: 1, width } })
        const beyond = normalCumulative(-width - shiftSigma) + normalCumulative(shiftSigma - width)
        expect(Math.abs(got * beyond - 1)).toBeLessThan(1e-8)
      }),
      { numRuns: 30 },
    )
  })

  test('carried point by point it gives the same average', () => {
    const ewma = { lambda: 0.2, width: 2.7 }
    const chances = chanceSeenWithin({ chart: 'ewma', n: 1, shiftSigma: 1, ewma }, 400)
    const summed = 1 + chances.reduce((sum, chance) => sum + (1 - chance), 0)
    expect(averageRunLength({ chart: 'ewma', n: 1, shiftSigma: 1, ewma }).averageRunLength).toBeCloseTo(summed, 7)
  })

  test('sees a drift sooner than a shift of the first step alone', () => {
    const step = averageRunLength({ chart: 'ewma', n: 4, shiftSigma: 0.1 }).averageRunLength
    expect(averageRunLength({ chart: 'ewma', n: 4, shiftSigma: 0, driftSigma: 0.1 }).averageRunLength).toBeLessThan(step)
  })
})

describe('CUSUM', () => {
  test.each([
    [0.5, 4, 0, 0.5],
    [0.25, 6, 3, 1],
    [1, 2.5, 1.5, 0],
  ])('k = %s, h = %s, head start %s under a shift of %s agrees with its simulation', (k, h, headStart, shiftSigma) => {
    const exact = averageRunLength({ chart: 'cusum', n: 1, shiftSigma, cusum: { k, h, headStart } })
    const exposure = { shiftAt: () => shiftSigma, isSteady: true, sd: 1 }
    const simulated = simulateRunLength(cusumWatcher({ k, h, headStart }), exposure, 11)
    expect(exact.method).toBe('exact')
    expect(Math.abs(exact.averageRunLength - simulated.averageRunLength)).toBeLessThan(4 * simulated.standardError)
  })

  test('a shift far out is seen at once, though the other side never signals', () => {
    expect(averageRunLength({ chart: 'cusum', n: 1000, shiftSigma: 100 }).averageRunLength).toBe(1)
    expect(averageRunLength({ chart: 'cusum', n: 1, shiftSigma: -30 }).averageRunLength).toBe(1)
  })

  test('a head start too large for the exact rule, and a drift, are simulated', () => {
    expect(averageRunLength({ chart: 'cusum', n: 1, shiftSigma: 1, cusum: { k: 0.1, h: 5, headStart: 4 } }).method).toBe('simulated')
    expect(averageRunLength({ chart: 'cusum', n: 5, shiftSigma: 0, driftSigma: 0.1 }).method).toBe('simulated')
  })
})

test('the chance of a signal rises to one and gives the average', () => {
  const request = { chart: 'xbar-r', n: 5, shiftSigma: 1, tests: [1, 2] } as const
  const chances = chanceSeenWithin(request, 300)
  expect(chances.every((chance, place) => place === 0 || chance >= chances[place - 1]!)).toBe(true)
  const summed = 1 + chances.reduce((sum, chance) => sum + (1 - chance), 0)
  expect(averageRunLength(request).averageRunLength).toBeCloseTo(summed, 8)
})

test('Gauss–Legendre integrates polynomials of degree 2n − 1 exactly', () => {
  fc.assert(
    fc.property(fc.integer({ min: 1, max: 60 }), fc.integer({ min: 0, max: 20 }), (n, power) => {
      const degree = Math.min(power, 2 * n - 1)
      const { nodes, weights } = gaussLegendre(n, { lower: 0, upper: 2 })
      const sum = nodes.reduce((total, node, place) => total + weights[place]! * node ** degree, 0)
      expect(sum / (2 ** (degree + 1) / (degree + 1))).toBeCloseTo(1, 11)
    }),
  )
})

const plain = { chart: 'xbar-r', n: 5, shiftSigma: 1 } as const
test.each([
  [{ ...plain, n: 0 }, 'out-of-range', 'n'],
  [{ ...plain, n: 2.5 }, 'not-whole', 'n'],
  [{ ...plain, chart: 'individuals' as const }, 'out-of-range', 'n'],
  [{ ...plain, shiftSigma: Number.NaN }, 'not-finite', 'shiftSigma'],
  [{ ...plain, betweenSigma: -1 }, 'out-of-range', 'betweenSigma'],
  [{ ...plain, tests: [] }, 'too-few-values', 'tests'],
  [{ ...plain, tests: [9] }, 'unknown-option', 'tests'],
  [{ ...plain, sameSideRun: 1 }, 'out-of-range', 'testLengths'],
  [{ ...plain, chart: 'ewma' as const, ewma: { lambda: 0, width: 3 } }, 'not-positive', 'ewma.lambda'],
  [{ ...plain, chart: 'ewma' as const, ewma: { lambda: 1.1, width: 3 } }, 'out-of-range', 'ewma.lambda'],
  [{ ...plain, chart: 'cusum' as const, cusum: { k: 0.5, h: 5, headStart: 5 } }, 'out-of-range', 'cusum.headStart'],
  [{ ...plain, chart: 'cusum' as const, cusum: { k: 0, h: 5, headStart: 0 } }, 'not-positive', 'cusum.k'],
  [{ ...plain, tests: [7], shiftSigma: 9 }, 'no-convergence', 'tests'],
  [{ ...plain, chart: 'ewma' as const, shiftSigma: 0, ewma: { lambda: 0.01, width: 10 } }, 'no-convergence', 'tests'],
  [{ ...plain, chart: 'cusum' as const, shiftSigma: 0, cusum: { k: 1, h: 40, headStart: 0 } }, 'no-convergence', 'tests'],
  [{ ...plain, seed: -1 }, 'out-of-range', 'seed'],
])('refuses %j: %s', (request, code, argument) => {
  expect(() => averageRunLength({ ...request, tests: 'tests' in request ? request.tests : [1, 2] })).toThrow(
    expect.objectContaining({ code, argument }),
  )
})
