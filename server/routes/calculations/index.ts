import { controlChartEndpoints } from './control-chart.ts'
import { inferenceEndpoints } from './inference.ts'
import { passProbabilityEndpoints } from './pass-probability.ts'
import { runLengthEndpoints } from './run-length.ts'
import { summaryEndpoints } from './summary.ts'
import { tuningEndpoints } from './tuning.ts'
import { uniformityEndpoints } from './uniformity.ts'

/** The stateless calculations: anyone can check any figure with them. */
export const calculationEndpoints = [
  ...summaryEndpoints,
  ...controlChartEndpoints,
  ...inferenceEndpoints,
  ...uniformityEndpoints,
  ...passProbabilityEndpoints,
  ...runLengthEndpoints,
  ...tuningEndpoints,
]
