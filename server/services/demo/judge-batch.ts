import type { ScenarioProduct } from '#fixtures/scenario/records.ts'
import { drawChart } from '#shared/statistics/charts/draw-chart.ts'
import { chartColumns } from '#shared/trade/chart-columns.ts'
import { judgeByLimits, verdictOf } from '#shared/trade/judge-sample.ts'
import type { SignalSource, Verdict } from '#shared/vocabulary.ts'
import type { SampleRow } from './sample-rows.ts'

export interface DemoVerdict {
  verdict: Verdict
  sources: SignalSource[]
}

/** As in the service that judges single samples: fewer have no limits worth testing against. */
const FEWEST_FOR_LIMITS = 8

/**
 * Judges the complete samples of a batch as the service judges each: by the limits of the plan, and by its run tests over
 * the samples of the phase so far. All in memory, since reading a thousand phases back would take the demo minutes.
 * @param phaseStarts moments of adjustments, in order of time
 */
export function judgeBatch(
  { targetFillMg, plan }: Pick<ScenarioProduct, 'targetFillMg' | 'plan'>,
  samples: readonly { row: SampleRow; valuesMg: readonly number[] }[],
  phaseStarts: readonly Date[],
): Map<string, DemoVerdict> {
  const complete = samples
    .filter(({ row }) => row.state === 'complete')
    .toSorted((a, b) => a.row.startedAt.getTime() - b.row.startedAt.getTime())
  const charted = complete.map(({ row }) => row).filter(({ kind, excludedReason }) => kind !== 'start-up' && excludedReason === null)
  return new Map(
    complete.map(({ row, valuesMg }) => {
      const { basis, tareMeanMg } = row
      const { reasons } = judgeByLimits({ valuesMg, basis, targetFillMg, tareMeanMg, limits: plan })
      const phase = phaseUpTo(row, charted, phaseStarts)
      const sources = [...reasons.map((reason) => ({ ...reason, sampleIds: [row.id] })), ...patterns(plan, row, phase)]
      return [row.id, { verdict: verdictOf(sources), sources }]
    }),
  )
}

function phaseUpTo(row: SampleRow, charted: readonly SampleRow[], phaseStarts: readonly Date[]): SampleRow[] {
  const from = phaseStarts.findLast((moment) => moment <= row.startedAt)
  return charted.filter(({ startedAt }) => startedAt <= row.startedAt && (from === undefined || startedAt >= from))
}

function patterns({ chart, runTests }: ScenarioProduct['plan'], row: SampleRow, phase: readonly SampleRow[]): SignalSource[] {
  const point = phase.length - 1
  if (phase.length < FEWEST_FOR_LIMITS || phase[point]?.id !== row.id) return []
  return drawChart(chartColumns(phase, chart), { chart, tests: runTests })
    .signals.filter((signal) => signal.point === point)
    .map(({ test, panel, name, sentence, points }) => ({
      ...{ test: `test-${test}-${panel}`, name, severity: 'alert' as const, sentence },
      sampleIds: points.flatMap((place) => phase[place]?.id ?? []),
    }))
}
