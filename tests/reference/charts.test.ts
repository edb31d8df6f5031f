import { test } from 'vitest'
import { controlChart } from '#shared/statistics/control-chart.ts'
import { expectCase, loadCases } from './compare.ts'

test.each(loadCases('charts'))('$id', (referenceCase) => {
  const answer = controlChart(referenceCase.body)
  expectCase(answer, referenceCase)
})
