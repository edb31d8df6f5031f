import type { SignalSource } from '#shared/vocabulary.ts'
import { drawChart } from '#shared/statistics/charts/draw-chart.ts'
import { StatisticsError } from '#shared/statistics/errors.ts'
import { chartColumns } from '#shared/trade/chart-columns.ts'
import { MachineEvent } from '../../models/machine-event.ts'
import { Sample } from '../../models/sample.ts'
import type { SampleContext } from './sample-context.ts'

/** Limits from fewer samples than this move with every new one and would cry wolf. */
const FEWEST_FOR_LIMITS = 8

/** The moment from which the run is one process: the last tooling change or adjustment before the sample. */
async function phaseStart({ sample, batch }: SampleContext): Promise<Date | null> {
  const events = await MachineEvent.findAll({
    where: { batchId: batch.id, kind: ['changeover', 'adjustment'] },
    order: [['happenedAt', 'DESC']],
  })
  return events.find(({ happenedAt }) => happenedAt <= sample.startedAt)?.happenedAt ?? null
}

/**
 * The run tests of the plan that end at this sample, over the samples of its phase. A pattern raises an alert: that the
 * process moved, not that a limit is broken.
 */
export async function runTestReasons(context: SampleContext): Promise<SignalSource[]> {
  const { sample, batch, plan } = context
  const from = await phaseStart(context)
  const samples = await Sample.findAll({
    where: { batchId: batch.id, state: 'complete' },
    order: [
      ['startedAt', 'ASC'],
      ['sequence', 'ASC'],
    ],
  })
  const phase = samples.filter((one) => one.excludedReason === null && one.kind !== 'start-up' && (from === null || one.startedAt >= from))
  const point = phase.findIndex(({ id }) => id === sample.id)
  if (point < 0 || point + 1 < FEWEST_FOR_LIMITS) return []
  const upToHere = phase.slice(0, point + 1)
  try {
    const drawn = drawChart(chartColumns(upToHere, plan.chart), { chart: plan.chart, tests: plan.runTests })
    return drawn.signals
      .filter((signal) => signal.point === point)
      .map(({ test, panel, name, sentence, points }) => ({
        test: `test-${test}-${panel}`,
        name,
        severity: 'alert' as const,
        sentence,
        sampleIds: points.map((place) => upToHere[place]?.id ?? ''),
      }))
  } catch (error) {
    // Samples without any spread have no limits to test against; the plan's own limits still judge them.
    if (error instanceof StatisticsError) return []
    throw error
  }
}
