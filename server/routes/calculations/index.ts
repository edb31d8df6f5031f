import { controlChartEndpoints } from './control-chart.ts'
import { inferenceEndpoints } from './inference.ts'
import { summaryEndpoints } from './summary.ts'

/** The stateless calculations: anyone can check any figure with them. */
export const calculationEndpoints = [...summaryEndpoints, ...controlChartEndpoints, ...inferenceEndpoints]
