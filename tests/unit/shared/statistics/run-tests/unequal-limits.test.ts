import fc from 'fast-check'
import { expect, test } from 'vitest'
import { controlChart, lineAt, type PanelAnswer } from '#shared/statistics/control-chart.ts'
import { unequalSubgroups } from '../subgroup-arbitraries.ts'

/** How many of its own sigmas a point stands from its own centre. */
const scoresOf = ({ points, center, sigma }: PanelAnswer): number[] =>
  points.map((value, point) => ((value ?? NaN) - (lineAt(center, point) ?? NaN)) / (lineAt(sigma, point) ?? NaN))

const located = (request: Parameters<typeof controlChart>[0], panel: string) =>
  controlChart(request)
    .signals.filter((signal) => signal.panel === panel)
    .map(({ point, test: number }) => [number, point])

test('with sizes that differ, zones are measured in each point’s own sigma', () => {
  fc.assert(
    fc.property(unequalSubgroups, (subgroups) => {
      const request = { chart: 'xbar-s' as const, subgroups, target: 350.03, sigma: 17.1 }
      const scores = scoresOf(controlChart(request).location)
      // The same scores as single values about zero, with a sigma of one, must raise the same signals; order is left to its own test.
      const tests = [1, 2, 5, 6, 7, 8]
      const asScores = { chart: 'individuals' as const, subgroups: scores.map((score) => [score]), target: 0, sigma: 1, tests }
      expect(located({ ...request, tests }, 'location')).toEqual(located(asScores, 'location'))
    }),
  )
})

test('ranges of growing samples climb by size alone, and that is no trend', () => {
  // Each range is exactly what a sample of its size shows on average.
  const usual = [2, 3, 4, 5, 6, 7, 8].map((size) => {
    const { spread } = controlChart({ chart: 'xbar-r', subgroups: [Array.from({ length: size }, () => 350)], target: 350, sigma: 4 })
    const range = lineAt(spread?.center ?? null, 0) ?? NaN
    return [350 - range / 2, 350 + range / 2, ...Array.from({ length: size - 2 }, () => 350)]
  })
  // A little less each time, against sizes that grow: falling in sigmas although the ranges themselves climb.
  const falling = usual.map((values, i) => values.map((value) => 350 + (value - 350) * (1 - i / 50)))
  const climbing = controlChart({ chart: 'xbar-r', subgroups: falling, target: 350, sigma: 4, tests: [3] })
  expect(climbing.spread?.points).toEqual(climbing.spread?.points.toSorted((a, b) => (a ?? 0) - (b ?? 0)))
  const names = climbing.signals.filter(({ panel }) => panel === 'spread').map(({ name }) => name)
  expect(new Set(names)).toEqual(new Set(['six falling']))
})
