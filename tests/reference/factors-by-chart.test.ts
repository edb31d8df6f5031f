import { test } from 'vitest'
import { controlChart } from '#shared/statistics/control-chart.ts'
import { expectCase, loadCases } from './compare.ts'

test.each(loadCases('factors-by-chart'))('$id', (referenceCase) => {
  expectCase(controlChart(referenceCase.body), referenceCase)
})
