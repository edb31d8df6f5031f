import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { CHART_IDS } from '#shared/statistics/charts/index.ts'
import { controlChart, lineAt, panelsOf, type ControlChartAnswer, type ControlChartRequest } from '#shared/statistics/control-chart.ts'
import { StatisticsError } from '#shared/statistics/errors.ts'
import { equalSubgroups, singleValues, unequalSubgroups, wildSubgroups } from './subgroup-arbitraries.ts'

const ALL_TESTS = [1, 2, 3, 4, 5, 6, 7, 8]

/** Any chart with subgroups that it takes. */
const anyChart: fc.Arbitrary<ControlChartRequest> = fc
  .constantFrom(...CHART_IDS)
  .chain((chart) =>
    (chart === 'individuals' ? singleValues : unequalSubgroups).map((subgroups) => ({ chart, subgroups, tests: ALL_TESTS })),
  )

function figuresOf(answer: ControlChartAnswer): (number | null)[] {
  return panelsOf(answer).flatMap(([, { points, center, lower, upper }]) => [
    ...points,
    ...(Array.isArray(center) ? center : [center]),
    ...lower,
    ...upper,
  ])
}

describe('a control chart is refused', () => {
  const pairs = [
    [350, 351],
    [349, 352],
    [351, 350],
  ]
  const request = (more: object): ControlChartRequest => ({ chart: 'xbar-r', subgroups: pairs, ...more })
  test.each<[string, object, string, string]>([
    ['of an unknown kind', { chart: 'pie' }, 'unknown-option', 'chart'],
    ['without subgroups', { subgroups: [] }, 'too-few-values', 'subgroups'],
    ['with a single value among subgroups', { subgroups: [[350, 351], [350]] }, 'too-few-values', 'subgroups[1]'],
    ['of single values, given pairs', { chart: 'individuals' }, 'too-many-values', 'subgroups[0]'],
    ['of one single value, which has no moving range', { chart: 'individuals', subgroups: [[350]] }, 'too-few-values', 'subgroups'],
    ['between and within, of one subgroup', { chart: 'between-within', subgroups: [[350, 351]] }, 'too-few-values', 'subgroups'],
    ['by an unknown estimator', { estimator: 'guess' }, 'unknown-option', 'estimator'],
    ['by an estimator that does not fit', { estimator: 'moving-range' }, 'not-supported', 'estimator'],
    ['about a target that is no number', { target: NaN }, 'not-finite', 'target'],
    ['with a sigma of zero', { sigma: 0 }, 'not-positive', 'sigma'],
    ['with an unknown test', { tests: [9] }, 'unknown-option', 'tests'],
    ['with a length for an unknown test', { testLengths: [{ test: 0, length: 7 }] }, 'unknown-option', 'testLengths'],
    ['with half a point', { tests: [2], testLengths: [{ test: 2, length: 7.5 }] }, 'not-whole', 'testLengths'],
    ['with a run of one', { tests: [2], testLengths: [{ test: 2, length: 1 }] }, 'out-of-range', 'testLengths'],
    ['with a weight above one', { chart: 'ewma', ewma: { lambda: 1.2 } }, 'out-of-range', 'ewma.lambda'],
    ['with a weight of zero', { chart: 'ewma', ewma: { lambda: 0 } }, 'not-positive', 'ewma.lambda'],
    ['with a head start past the decision', { chart: 'cusum', cusum: { h: 4, headStart: 5 } }, 'out-of-range', 'cusum.headStart'],
    ['with a phase past the end', { phases: [{ from: 3, label: 'x' }] }, 'out-of-range', 'phases[1].from'],
    ['with phases out of order', { phases: [2, 1].map((from) => ({ from, label: 'x' })) }, 'out-of-range', 'phases'],
    ['with a left-out point past the end', { leaveOut: [{ point: 3, reason: 'spilt' }] }, 'out-of-range', 'leaveOut'],
    ['with every point left out', { leaveOut: [0, 1, 2].map((point) => ({ point, reason: 'spilt' })) }, 'too-few-values', 'subgroups'],
  ])('%s', (_name, more, code, argument) => {
    expect(() => controlChart(request(more))).toThrow(expect.objectContaining({ code, argument }))
  })
})

test('the centre lies inside the limits at every point of every panel', () => {
  fc.assert(
    fc.property(anyChart, (request) => {
      for (const [, panel] of panelsOf(controlChart(request))) {
        panel.lower.forEach((lower, point) => {
          const center = lineAt(panel.center, point) ?? NaN
          expect(lower ?? NaN).toBeLessThanOrEqual(center)
          expect(panel.upper[point] ?? NaN).toBeGreaterThanOrEqual(center)
        })
      }
    }),
  )
})

test('any finite numbers give finite figures or a typed refusal', () => {
  fc.assert(
    fc.property(fc.constantFrom(...CHART_IDS), wildSubgroups, (chart, subgroups) => {
      try {
        const answer = controlChart({
          chart,
          subgroups: chart === 'individuals' ? subgroups.flat().map((x) => [x]) : subgroups,
          tests: ALL_TESTS,
        })
        expect(figuresOf(answer).every((figure) => figure === null || Number.isFinite(figure))).toBe(true)
      } catch (error) {
        if (!(error instanceof StatisticsError)) throw error
        expect(['out-of-range', 'too-few-values']).toContain(error.code)
      }
    }),
    { numRuns: 500 },
  )
})

test('a shift moves the location panel alone', () => {
  fc.assert(
    fc.property(anyChart, (request) => {
      const plain = controlChart(request)
      const shifted = controlChart({ ...request, subgroups: request.subgroups.map((subgroup) => Array.from(subgroup, (x) => x + 128)) })
      expect(shifted.sigmaWithin).toBeCloseTo(plain.sigmaWithin ?? NaN, 8)
      const moves = request.chart === 'cusum' ? 0 : 128
      plain.location.upper.forEach((upper, point) => expect(shifted.location.upper[point]).toBeCloseTo((upper ?? NaN) + moves, 7))
      plain.spread?.upper.forEach((upper, point) => expect(shifted.spread?.upper[point]).toBeCloseTo(upper ?? NaN, 7))
    }),
  )
})

test('a scale by a power of two multiplies every figure exactly and leaves every signal', () => {
  fc.assert(
    fc.property(anyChart, fc.constantFrom(0.25, 2, 64), (request, scale) => {
      const plain = controlChart(request)
      const scaled = controlChart({ ...request, subgroups: request.subgroups.map((subgroup) => Array.from(subgroup, (x) => x * scale)) })
      expect(figuresOf(scaled)).toEqual(figuresOf(plain).map((figure) => figure && figure * scale))
      const places = ({ signals }: ControlChartAnswer) => signals.map(({ point, test, panel, points }) => ({ point, test, panel, points }))
      expect(places(scaled)).toEqual(places(plain))
    }),
  )
})

test('the order inside a subgroup, and of the subgroups, does not move the limits of means', () => {
  fc.assert(
    fc.property(equalSubgroups({ size: 4 }), fc.constantFrom('xbar-r' as const, 'xbar-s' as const), (subgroups, chart) => {
      const one = controlChart({ chart, subgroups })
      const other = controlChart({ chart, subgroups: subgroups.map((subgroup) => subgroup.toReversed()).toReversed() })
      expect(other.location.upper[0]).toBeCloseTo(one.location.upper[0] ?? NaN, 8)
      expect(other.spread?.upper[0]).toBeCloseTo(one.spread?.upper[0] ?? NaN, 8)
    }),
  )
})

test('each phase is drawn as if it were a chart of its own', () => {
  fc.assert(
    fc.property(anyChart, fc.nat(), (request, place) => {
      fc.pre(request.subgroups.length >= 4)
      const border = 2 + (place % (request.subgroups.length - 3))
      const together = controlChart({ ...request, phases: [{ from: border, label: 'after the changeover' }] })
      const apart = [request.subgroups.slice(0, border), request.subgroups.slice(border)].map((subgroups) =>
        controlChart({ ...request, subgroups }),
      )
      expect(together.phases.map(({ from, to, label }) => [from, to, label])).toEqual([
        [0, border, ''],
        [border, request.subgroups.length, 'after the changeover'],
      ])
      // A panel with ranges knows the sizes of the whole chart, so what its tests may assume can be less than apart.
      const onLocation = ({ signals }: ControlChartAnswer) => signals.filter(({ panel }) => panel === 'location')
      expect(together.location.points).toEqual(apart.flatMap(({ location }) => location.points))
      expect(together.location.upper).toEqual(apart.flatMap(({ location }) => location.upper))
      expect(together.spread?.lower).toEqual(apart[0]?.spread ? apart.flatMap(({ spread }) => spread?.lower ?? []) : undefined)
      expect(onLocation(together).map(({ point, test }) => [point, test])).toEqual(
        apart.flatMap((answer, i) => onLocation(answer).map(({ point, test }) => [point + i * border, test])),
      )
    }),
  )
})

test('a point left out is plotted and tested against limits that do not know it', () => {
  fc.assert(
    fc.property(equalSubgroups({ size: 5, least: 3 }), fc.nat(), (subgroups, place) => {
      const point = place % subgroups.length
      const answer = controlChart({ chart: 'xbar-s', subgroups, leaveOut: [{ point, reason: 'spilt while weighing' }] })
      const without = controlChart({ chart: 'xbar-s', subgroups: subgroups.toSpliced(point, 1) })
      expect(answer.location.points).toHaveLength(subgroups.length)
      expect(answer.location.upper[point]).toBeCloseTo(without.location.upper[0] ?? NaN, 8)
      expect(answer.phases[0]).toMatchObject({ used: subgroups.length - 1, leftOut: [{ point, reason: 'spilt while weighing' }] })
    }),
  )
})

test('a phase too short for limits has none, and the others keep theirs', () => {
  const subgroups = [[350], [352], [349], [351], [360]]
  const answer = controlChart({ chart: 'individuals', subgroups, phases: [{ from: 4, label: 'after the stop' }] })
  expect(answer.location.upper.map((upper) => upper === null)).toEqual([false, false, false, false, true])
  expect(answer.phases[1]).toMatchObject({ center: 360, sigmaWithin: null })
  expect(answer.sigmaWithin).toBe(answer.phases[0]?.sigmaWithin)
})

test('a phase with approved limits keeps them', () => {
  const subgroups = [[350], [352], [349], [351], [360]]
  const phases = [{ from: 4, label: 'after the stop', target: 350, sigma: 2 }]
  const { location } = controlChart({ chart: 'individuals', subgroups, phases })
  expect([location.lower[4], lineAt(location.center, 4), location.upper[4]]).toEqual([344, 350, 356])
})

test('a line is one figure where it never changes, and one a point where it does', () => {
  const equal = controlChart({
    chart: 'xbar-r',
    subgroups: [
      [1, 2],
      [2, 4],
    ],
  })
  const unequal = controlChart({
    chart: 'xbar-r',
    subgroups: [
      [1, 2],
      [2, 4, 3],
    ],
  })
  expect(equal.spread?.center).toBe(1.5)
  expect(unequal.spread?.center).toHaveLength(2)
  expect(lineAt(unequal.spread?.center ?? null, 1)).toBeGreaterThan(lineAt(unequal.spread?.center ?? null, 0) ?? NaN)
})

test('each panel is tested only by what its points allow', () => {
  const testsOf = (chart: ControlChartRequest['chart'], subgroups: number[][]) =>
    Object.fromEntries(panelsOf(controlChart({ chart, subgroups, tests: ALL_TESTS })).map(([name, { tests }]) => [name, tests]))
  const of = (size: number) => [0, 1, 2].map((step) => Array.from({ length: size }, (_, i) => 350 + step + i))
  expect(testsOf('xbar-r', of(4))).toEqual({ location: ALL_TESTS, spread: [1, 3, 4] })
  expect(testsOf('xbar-s', of(5))).toEqual({ location: ALL_TESTS, spread: [1, 2, 3, 4] })
  expect(testsOf('individuals', of(1))).toEqual({ location: ALL_TESTS, spread: [1] })
  expect(testsOf('ewma', of(4))).toEqual({ location: [1] })
  expect(testsOf('cusum', of(4))).toEqual({ location: [1] })
  expect(testsOf('between-within', of(4))).toEqual({ location: ALL_TESTS, spread: [1, 3, 4], between: [1] })
})
