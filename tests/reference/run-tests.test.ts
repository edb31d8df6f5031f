import { expect, test } from 'vitest'
import { controlChart } from '#shared/statistics/control-chart.ts'
import { RUN_TEST_NUMBERS } from '#shared/statistics/run-tests/index.ts'
import { expectCase, loadCases } from './compare.ts'

// The cases are about the location panel; a large step may show on the moving ranges as well.
test.each(loadCases('run-tests'))('$id', (referenceCase) => {
  const { signals } = controlChart(referenceCase.body)
  expectCase({ signals: signals.filter(({ panel }) => panel === 'location') }, referenceCase)
})

test.each(RUN_TEST_NUMBERS)('run test %i has a case that signals and a near miss that does not', (number) => {
  const ofThis = loadCases('run-tests').filter(({ id }) => id.startsWith(`run-tests-t${number}-`))
  const counts = ofThis.map(({ expected }) => (expected as { signals: unknown[] }).signals.length)
  expect(Math.min(...counts)).toBe(0)
  expect(Math.max(...counts)).toBeGreaterThan(0)
})
