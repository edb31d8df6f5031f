import type { BatchChart } from '#shared/schemas/batch-chart.ts'
import { compareBeforeAfter } from '#shared/statistics/comparison.ts'
import { StatisticsError } from '#shared/statistics/errors.ts'
import { distanceToLimit, trend } from '#shared/statistics/trend.ts'
import type { PhaseMark } from './batch-chart.ts'

const CONFIDENCE = 0.95
/** A line through fewer samples than this says nothing that a person should act on. */
const FEWEST_FOR_DRIFT = 5
const FEWEST_A_SIDE = 3

type Samples = BatchChart['samples']

/** Start-up and excluded samples tell how the machine was set, not how it runs. */
const isRunning = ({ kind, isExcluded }: Samples[number]): boolean => kind !== 'start-up' && !isExcluded

/** A calculation that has too little to go on gives nothing, not a figure that misleads. */
function orNothing<T>(calculate: () => T): T | null {
  try {
    return calculate()
  } catch (error) {
    if (error instanceof StatisticsError) return null
    throw error
  }
}

/** How the mean moves since the last tooling change or adjustment, and when it would reach the alert limit it runs towards. */
export function driftOf(
  samples: Samples,
  marks: readonly PhaseMark[],
  [lowMg, highMg]: readonly [number, number],
  capsulesPerHour: number,
): BatchChart['drift'] {
  const mark = marks.at(-1)
  if (!mark) return null
  const phase = samples.slice(mark.from).filter(isRunning)
  if (phase.length < FEWEST_FOR_DRIFT) return null
  const hoursOf = ({ startedAt }: Samples[number]): number =>
    (Date.parse(startedAt) - Date.parse(phase[0]?.startedAt ?? startedAt)) / 3_600_000
  const y = phase.map(({ meanMg }) => meanMg)
  const byHour = orNothing(() => trend({ x: phase.map(hoursOf), y, confidence: CONFIDENCE }))
  if (!byHour) return null
  const thousands = phase.map(({ capsulesMade }) => (capsulesMade ?? NaN) / 1_000)
  const byThousand = orNothing(() => trend({ x: thousands, y, confidence: CONFIDENCE }))
  const limitMg = byHour.slope < 0 ? lowMg : highMg
  const last = phase.at(-1)
  const hours = last ? distanceToLimit(byHour, hoursOf(last), limitMg) : null
  const isReal = byHour.autocorrelationInterval[0] * byHour.autocorrelationInterval[1] > 0
  return {
    since: mark.label,
    fromPoint: mark.from,
    n: phase.length,
    perHour: byHour.slope,
    perHourInterval: byHour.autocorrelationInterval,
    perThousand: byThousand?.slope ?? null,
    perThousandInterval: byThousand?.autocorrelationInterval ?? null,
    pValue: byHour.pValue,
    interceptMg: byHour.intercept,
    residualSdMg: byHour.residualSd,
    limitMg: isReal ? limitMg : null,
    minutesToLimit: isReal && hours !== null ? hours * 60 : null,
    capsulesToLimit: isReal && hours !== null ? hours * capsulesPerHour : null,
  }
}

/** The samples of the phase before the last change against those after it: the difference of the means and of the spreads. */
export function changeEffect(samples: Samples, marks: readonly PhaseMark[]): BatchChart['change'] {
  for (let place = marks.length - 1; place >= 1; place--) {
    const mark = marks[place]
    const previous = marks[place - 1]
    if (!mark?.startedAt || !previous) continue
    const before = samples.slice(previous.from, mark.from).filter(isRunning)
    const after = samples.slice(mark.from, marks[place + 1]?.from).filter(isRunning)
    if (before.length < FEWEST_A_SIDE || after.length < FEWEST_A_SIDE) continue
    const means = orNothing(() =>
      compareBeforeAfter({ before: before.map(({ meanMg }) => meanMg), after: after.map(({ meanMg }) => meanMg), confidence: CONFIDENCE }),
    )
    if (!means) continue
    const sds = (side: Samples): number[] => side.flatMap(({ sdMg }) => (sdMg === null ? [] : [sdMg]))
    const spread = orNothing(() => compareBeforeAfter({ before: sds(before), after: sds(after), confidence: CONFIDENCE }))
    return {
      label: mark.label,
      happenedAt: mark.startedAt,
      before: before.length,
      after: after.length,
      differenceMg: means.difference,
      intervalMg: means.interval,
      pValue: means.pValue,
      spreadDifferenceMg: spread?.difference ?? null,
      spreadIntervalMg: spread?.interval ?? null,
    }
  }
  return null
}
