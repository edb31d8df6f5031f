import { describe, expect, test } from 'vitest'
import { ControlChartRequest } from '#shared/schemas/calculations/control-chart.ts'
import { SummaryRequest } from '#shared/schemas/calculations/summary.ts'
import { controlChart } from '#shared/statistics/control-chart.ts'

const request = {
  chart: 'xbar-r',
  subgroups: [
    [350, 351],
    [349, 352],
    [351, 350],
  ],
}

describe('a request for a control chart is refused at', () => {
  test.each<[string, object, string]>([
    ['an unknown field', { colour: 'blue' }, ''],
    ['an unknown chart', { chart: 'pie' }, 'chart'],
    ['no subgroups', { subgroups: [] }, 'subgroups'],
    ['an empty subgroup', { subgroups: [[350], []] }, 'subgroups.1'],
    ['a subgroup of a thousand and one', { subgroups: [Array.from({ length: 1001 }, () => 350)] }, 'subgroups.0'],
    ['a weight in words', { subgroups: [['350', 351]] }, 'subgroups.0.0'],
    ['a weight that is no number', { subgroups: [[NaN, 351]] }, 'subgroups.0.0'],
    ['an unknown estimator', { estimator: 'guess' }, 'estimator'],
    ['a sigma of zero', { sigma: 0 }, 'sigma'],
    ['a ninth test', { tests: [9] }, 'tests.0'],
    ['an unknown setting of the weighted mean', { ewma: { alpha: 0.2 } }, 'ewma'],
    ['a weight of the newest mean above one', { ewma: { lambda: 1.1 } }, 'ewma.lambda'],
    ['a negative allowance', { cusum: { k: -1 } }, 'cusum.k'],
    ['half a point', { phases: [{ from: 1.5, label: 'x' }] }, 'phases.0.from'],
    ['a point left out without a reason', { leaveOut: [{ point: 1, reason: '  ' }] }, 'leaveOut.0.reason'],
  ])('%s', (_name, more, path) => {
    const { success, error } = ControlChartRequest.safeParse({ ...request, ...more })
    expect(success).toBe(false)
    expect(error?.issues.map((issue) => issue.path.join('.'))).toEqual([path])
  })
})

test('a request with everything that can be said is taken and drawn', () => {
  const full = {
    ...request,
    estimator: 'pooled',
    target: 350,
    tests: [1, 2, 5],
    testLengths: [{ test: 2, length: 7 }],
    ewma: { lambda: 0.3 },
    cusum: { h: 4 },
    phases: [{ from: 1, label: 'after the changeover', target: 351, sigma: 1 }],
    leaveOut: [{ point: 2, reason: 'balance not settled' }],
  }
  const { phases } = controlChart(ControlChartRequest.parse(full))
  expect(phases.map(({ label, center, used }) => [label, center, used])).toEqual([
    ['', 350, 1],
    ['after the changeover', 351, 1],
  ])
})

test.each([[{ values: [350] }], [{ values: [350, Infinity] }], [{ values: [350, 351], unit: 'mg' }], [{}]])(
  'a summary of %j is refused',
  (body) => {
    expect(SummaryRequest.safeParse(body).success).toBe(false)
  },
)
