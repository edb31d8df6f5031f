import { drawChart } from '#shared/statistics/charts/draw-chart.ts'
import { andersonDarling } from '#shared/statistics/normality.ts'
import { RUN_TEST_NUMBERS } from '#shared/statistics/run-tests/index.ts'
import { selectInPlace } from '#shared/statistics/selection.ts'
import { estimateSigma } from '#shared/statistics/sigma.ts'
import { momentsOfSubgroups, summariseSubgroups } from '#shared/statistics/subgroups.ts'
import { inSubgroups, SPECIFICATION } from './weights.ts'

/** What every program must find in the same weights. */
export interface Figures {
  mean: number
  signals: number
  cpk: number
  ppk: number
}

/** Summaries, both charts of means with all run tests, and capability: everything from the bare column of weights. */
export function analyse(weights: Float64Array): Figures {
  const columns = summariseSubgroups(inSubgroups(weights))
  const ranges = drawChart(columns, { chart: 'xbar-r', tests: RUN_TEST_NUMBERS })
  const sds = drawChart(columns, { chart: 'xbar-s', tests: RUN_TEST_NUMBERS })
  const { n, mean, sumOfSquares } = momentsOfSubgroups(columns)
  const within = estimateSigma('pooled', columns, { from: 0, to: columns.n.length, leftOut: undefined })
  const nearest = Math.min(mean - SPECIFICATION.lower, SPECIFICATION.upper - mean)
  const overall = Math.sqrt(sumOfSquares / (n - 1))
  return { mean, signals: ranges.signals.length + sds.signals.length, cpk: nearest / (3 * within), ppk: nearest / (3 * overall) }
}

/** The same with a test for normality and the percentiles that hold the middle 99.73 % and the middle itself. */
export function analyseWithShape(weights: Float64Array): Figures & { andersonDarling: number; percentiles: number[] } {
  const percentiles = percentilesOf(weights, [0.00135, 0.5, 0.99865])
  return { ...analyse(weights), andersonDarling: andersonDarling(weights).statistic, percentiles }
}

function percentilesOf(weights: Float64Array, shares: number[]): number[] {
  const copy = weights.slice()
  return shares.map((share) => selectInPlace(copy, Math.round(share * (copy.length - 1))))
}
