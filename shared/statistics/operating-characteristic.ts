import { requireFinite, requirePositive, requireWhole, StatisticsError } from './errors.ts'
import { averageRunLength, chanceSeenWithin, type RunLengthAnswer, type RunLengthRequest } from './run-length.ts'

/** A control plan: what is weighed, how often, and what the chart watches with. */
export interface WatchPlan extends Pick<
  RunLengthRequest,
  'chart' | 'n' | 'tests' | 'testLengths' | 'sameSideRun' | 'ewma' | 'cusum' | 'seed'
> {
  intervalMinutes: number
  capsulesPerHour: number
  /** SD within samples, mg. */
  sigmaMg: number
  /** SD between samples, mg. */
  betweenSigmaMg?: number | undefined
}

/** A change to be seen: a step in mg, a drift in mg an hour, or both. */
export interface Change {
  shiftMg?: number | undefined
  driftMgPerHour?: number | undefined
}

/** How long a change goes on before the chart signals. */
export interface Foresight extends RunLengthAnswer {
  shiftMg: number
  driftMgPerHour: number
  /** From the change to the signal, a step coming at any moment between two samples with equal chance. */
  averageMinutes: number
  capsulesWeighed: number
  /** Made between the change and the signal. */
  capsulesMade: number
  /** The chance of a signal within the first 1, 2, … samples after the change. */
  seenWithin: number[]
  /** Samples after which the change is seen with a chance of 95 %; null where more than those of `seenWithin` are needed. */
  samplesFor95: number | null
}

export interface OperatingCharacteristic {
  /** Without any change: how often the chart raises a false alarm. */
  unchanged: RunLengthAnswer & { averageMinutes: number; falseAlarmsPer100Samples: number }
  changes: Foresight[]
}

const SAMPLES_SHOWN = 20

/**
 * What a control plan would see, and when: the engineer's what-if for sample size and interval.
 *
 * Formula  with L the average run length: a step meets the first sample half an interval later on average, so it lasts
 *          (L − ½)·interval; a drift starts right after a sample and lasts L·interval. Capsules made are rate × time,
 *          capsules weighed L·n, false alarms 100/L₀ in 100 samples.
 * Assumes  what {@link averageRunLength} assumes: centre and spread known, capsules normal, samples independent.
 * @param plan the plan, weights in mg
 * @param changes at least one and at most 20
 * @throws {StatisticsError} `not-finite`, `not-positive`, `out-of-range`, `too-few-values`, `too-many-values`, and those of {@link averageRunLength}
 * @see docs/calculations/run-length.md
 */
export function operatingCharacteristic(plan: WatchPlan, changes: readonly Change[]): OperatingCharacteristic {
  requireUpTo('intervalMinutes', plan.intervalMinutes, 1e6)
  requireUpTo('capsulesPerHour', plan.capsulesPerHour, 1e9)
  requirePositive('sigmaMg', plan.sigmaMg)
  if (changes.length === 0) throw new StatisticsError('too-few-values', 'changes', 'changes needs at least one change.')
  if (changes.length > 20) throw new StatisticsError('too-many-values', 'changes', 'changes can hold at most 20 changes.')
  const unchanged = averageRunLength(requestOf(plan, {}))
  return {
    unchanged: {
      ...unchanged,
      averageMinutes: unchanged.averageRunLength * plan.intervalMinutes,
      falseAlarmsPer100Samples: 100 / unchanged.averageRunLength,
    },
    changes: changes.map((change, place) => foresee(plan, change, place)),
  }
}

function requireUpTo(argument: string, value: number, most: number): void {
  requirePositive(argument, value)
  if (value > most) throw new StatisticsError('out-of-range', argument, `${argument} must be at most ${most}.`)
}

function requestOf(plan: WatchPlan, { shiftMg = 0, driftMgPerHour = 0 }: Change): RunLengthRequest {
  const { chart, n, tests, testLengths, sameSideRun, ewma, cusum, seed, intervalMinutes, sigmaMg, betweenSigmaMg = 0 } = plan
  return {
    ...{ chart, n, tests, testLengths, sameSideRun, ewma, cusum, seed },
    shiftSigma: shiftMg / sigmaMg,
    driftSigma: (driftMgPerHour * intervalMinutes) / 60 / sigmaMg,
    betweenSigma: betweenSigmaMg / sigmaMg,
  }
}

function foresee(plan: WatchPlan, change: Change, place: number): Foresight {
  const { shiftMg = 0, driftMgPerHour = 0 } = change
  requireFinite(`changes[${place}].shiftMg`, shiftMg)
  requireFinite(`changes[${place}].driftMgPerHour`, driftMgPerHour)
  const request = requestOf(plan, change)
  const answer = averageRunLength(request)
  const { averageRunLength: runLength } = answer
  const intervals = driftMgPerHour === 0 ? runLength - 0.5 : runLength
  const averageMinutes = intervals * plan.intervalMinutes
  const seenWithin = chanceSeenWithin(request, SAMPLES_SHOWN)
  const samples = seenWithin.findIndex((chance) => chance >= 0.95)
  return {
    ...answer,
    shiftMg,
    driftMgPerHour,
    averageMinutes,
    capsulesWeighed: runLength * plan.n,
    capsulesMade: (averageMinutes / 60) * plan.capsulesPerHour,
    seenWithin,
    samplesFor95: samples < 0 ? null : samples + 1,
  }
}

/** A sample size and an interval to be compared. */
export interface PlanOption {
  n: number
  intervalMinutes: number
}

/**
 * The same plan at other sample sizes and intervals, for one change: what each option costs in weighing and in product.
 * @param plan the plan whose size and interval are replaced
 * @param change to be seen
 * @param options at least one and at most 20
 * @returns the options with their figures, in the order given; capsules weighed an hour beside them
 * @throws {StatisticsError} as {@link operatingCharacteristic}
 */
export function comparePlans(
  plan: WatchPlan,
  change: Change,
  options: readonly PlanOption[],
): (PlanOption & OperatingCharacteristic & { weighedPerHour: number })[] {
  if (options.length === 0) throw new StatisticsError('too-few-values', 'options', 'options needs at least one option.')
  if (options.length > 20) throw new StatisticsError('too-many-values', 'options', 'options can hold at most 20 options.')
  return options.map(({ n, intervalMinutes }) => {
    requireWhole('options.n', n, { min: 1, max: 1000 })
    const seen = operatingCharacteristic({ ...plan, n, intervalMinutes }, [change])
    return { n, intervalMinutes, ...seen, weighedPerHour: (60 / intervalMinutes) * n }
  })
}
