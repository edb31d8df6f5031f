import { test } from 'vitest'
import { controlChart } from '#shared/statistics/control-chart.ts'
import { expectCase, loadCases } from './compare.ts'

// The cases are about the location panel; a large step may show on the moving ranges as well.
test.each(loadCases('run-tests'))('$id', (referenceCase) => {
  const { signals } = controlChart(referenceCase.body)
  expectCase({ signals: signals.filter(({ panel }) => panel === 'location') }, referenceCase)
})
