import { ControlChartAnswer, ControlChartRequest } from '#shared/schemas/calculations/control-chart.ts'
import { controlChart } from '#shared/statistics/control-chart.ts'
import { endpoint } from '../../http/endpoint.ts'

const postControlChart = endpoint({
  method: 'post',
  path: '/calculations/control-chart',
  summary: 'Draw a control chart of weights in subgroups, with its limits and signals',
  allow: 'signed-in',
  body: ControlChartRequest,
  answer: { status: 200, schema: ControlChartAnswer },
  handle: ({ body }) => controlChart(body),
})

export const controlChartEndpoints = [postControlChart]
