import { StatisticsError } from '../errors.ts'

/** What a chart is exposed to at its t-th point (from 1): the mean of the point in sigmas of the limits, and its SD in the same. */
export interface Exposure {
  shiftAt: (t: number) => number
  isSteady: boolean
  sd: number
}

/** A chart without a signal so far: one step at a time, with the share of runs that are still silent. */
export interface SilentRuns {
  /** Draws the t-th point (from 1) and returns the share that is silent after it. */
  advance: (t: number) => number
  /** Points before the share can be trusted to fall by a steady ratio. */
  settlesAfter: number
}

/** Where the summing of silent shares gives up: a chart that stays silent this long does not see the change. */
const MAX_POINTS = 50_000

/**
 * The average run length as the sum of the silent shares: ARL = Σ P(no signal in the first t points), t = 0, 1, 2 …
 *
 * Under a steady exposure the share ends up falling by the same ratio each point, and the rest of the sum is geometric;
 * under a drift it is added up until nothing is left.
 * @throws {StatisticsError} `no-convergence` where the chart would practically never signal
 */
export function averageFromSilence({ advance, settlesAfter }: SilentRuns, isSteady: boolean): number {
  let sum = 1
  let share = 1
  let ratio = 0
  let calm = 0
  for (let t = 1; t <= MAX_POINTS; t++) {
    const next = advance(t)
    sum += next
    if (next < 1e-16 * sum) return sum
    const newRatio = next / share
    calm = Math.abs(newRatio - ratio) < 1e-14 ? calm + 1 : 0
    share = next
    ratio = newRatio
    if (isSteady && t > settlesAfter && calm > 20 && ratio < 1 - 1e-11) return sum + (share * ratio) / (1 - ratio)
  }
  throw neverSignals()
}

/** The refusal to give a run length that nobody will live to see. */
export function neverSignals(): StatisticsError {
  return new StatisticsError('no-convergence', 'tests', 'This chart with these tests practically never signals under this change.')
}

/**
 * The chance of a signal within the first 1, 2, … `points` points.
 * @param points a whole number above zero
 */
export function chanceOfSignal({ advance }: SilentRuns, points: number): number[] {
  return Array.from({ length: points }, (_, place) => 1 - advance(place + 1))
}
