import { expect, test } from 'vitest'
import { ControlChartAnswer, ControlChartRequest } from '#shared/schemas/calculations/control-chart.ts'
import { CHART_IDS } from '#shared/statistics/charts/index.ts'
import { controlChart } from '#shared/statistics/control-chart.ts'
import { expectCase, loadCases } from './compare.ts'

test.each(loadCases('charts'))('$id', (referenceCase) => {
  const answer = controlChart(ControlChartRequest.parse(referenceCase.body))
  expectCase(answer, referenceCase)
  // The schema of the answer names every field, so none is lost on the way out.
  expect(ControlChartAnswer.parse(answer)).toEqual(answer)
})

test.each(CHART_IDS)('the chart %s has published or independently computed cases', (id) => {
  expect(loadCases('charts').some(({ body }: { body: { chart: string } }) => body.chart === id)).toBe(true)
})
