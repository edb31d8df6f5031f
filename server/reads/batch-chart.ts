import { QueryTypes } from 'sequelize'
import type { BatchChart, BatchChartQuery } from '#shared/schemas/batch-chart.ts'
import type { MachineEventAnswer } from '#shared/schemas/machine-events.ts'
import { drawChart, type DrawnChart } from '#shared/statistics/charts/draw-chart.ts'
import { answerOf, lineAt, type PanelAnswer } from '#shared/statistics/control-chart.ts'
import { StatisticsError } from '#shared/statistics/errors.ts'
import { chartColumns } from '#shared/trade/chart-columns.ts'
import { centreOf } from '#shared/trade/judge-sample.ts'
import type { ChartKind, SampleKind, Verdict } from '#shared/vocabulary.ts'
import { database } from '../database/database.ts'
import type { Actor } from '../http/actor.ts'
import { findBatch } from '../services/batches/find-batch.ts'
import { presentBatch } from '../services/batches/present-batch.ts'
import { listEvents } from '../services/machine-events/record-event.ts'
import { changeEffect, driftOf } from './batch-change.ts'

interface Row {
  id: string
  sequence: number
  kind: SampleKind
  startedAt: Date
  n: number
  meanMg: number
  sdMg: number | null
  rangeMg: number
  minMg: number
  maxMg: number
  verdict: Verdict
  capsulesMade: number | null
  isLate: number
  isExcluded: number
}

/** The summaries that the samples carry: no weight is read for a chart. */
export const CHART_QUERY = `
  SELECT id, sequence, kind, started_at AS startedAt, n, mean_mg AS meanMg, sd_mg AS sdMg, range_mg AS rangeMg, min_mg AS minMg,
    max_mg AS maxMg, verdict, capsules_made AS capsulesMade, is_late AS isLate, excluded_reason IS NOT NULL AS isExcluded
  FROM samples
  WHERE batch_id = :batchId AND state = 'complete'
  ORDER BY started_at, sequence`

export interface PhaseMark {
  from: number
  label: string
  startedAt: string | null
}

/** Complete samples of a batch in the order of time. */
export async function chartRows(batchId: string): Promise<BatchChart['samples']> {
  const rows = await database().query<Row>(CHART_QUERY, { replacements: { batchId }, type: QueryTypes.SELECT })
  return rows.map(({ startedAt, isLate, isExcluded, ...row }) => ({
    ...row,
    startedAt: startedAt.toISOString(),
    isLate: isLate === 1,
    isExcluded: isExcluded === 1,
  }))
}

function labelOf({ kind, station, valueFrom, valueTo, unit, label }: MachineEventAnswer): string {
  if (kind === 'changeover') return label === '' ? 'after the tooling change' : label
  const moved = (valueTo ?? 0) - (valueFrom ?? 0)
  return `station ${station ?? ''} ${moved > 0 ? '+' : '−'}${Math.abs(moved).toFixed(1)} ${unit ?? ''}`.trim()
}

/** A phase begins at the first sample after a tooling change or an adjustment. */
export function phaseMarks(
  samples: readonly { startedAt: string }[],
  events: readonly MachineEventAnswer[],
  firstLabel: string,
): PhaseMark[] {
  const marks: PhaseMark[] = [{ from: 0, label: firstLabel, startedAt: samples[0]?.startedAt ?? null }]
  for (const event of events) {
    if (event.kind !== 'changeover' && event.kind !== 'adjustment') continue
    const from = samples.findIndex(({ startedAt }) => startedAt >= event.happenedAt)
    if (from < 0) continue
    const mark = { from, label: labelOf(event), startedAt: event.happenedAt }
    if (from === 0 || marks.at(-1)?.from === from) marks[marks.length - 1] = mark
    else marks.push(mark)
  }
  return marks
}

const EMPTY_PANEL = { points: [], center: [], lower: [], upper: [] }

function panelOf({ points, center, lower, upper }: PanelAnswer): BatchChart['location'] {
  return { points, center: points.map((_, point) => lineAt(center, point)), lower, upper }
}

type Drawn = Pick<BatchChart, 'phases' | 'location' | 'spread' | 'signals' | 'noLimitsBecause'>

function drawn(samples: BatchChart['samples'], marks: readonly PhaseMark[], chart: ChartKind, tests: readonly number[]): Drawn {
  const bare = (because: string): Drawn => ({
    phases: marks.map(({ from, label, startedAt }, place) => ({
      from,
      to: marks[place + 1]?.from ?? samples.length,
      label,
      startedAt,
      centerMg: null,
      sigmaWithinMg: null,
    })),
    location: { ...EMPTY_PANEL, points: samples.map(({ meanMg }) => meanMg) },
    spread: { ...EMPTY_PANEL, points: samples.map(({ sdMg, rangeMg }) => (chart === 'xbar-r' ? rangeMg : sdMg)) },
    signals: [],
    noLimitsBecause: because,
  })
  if (samples.length < 2) return bare('Two samples or more are needed before limits can be worked out.')
  const leaveOut = samples.flatMap(({ isExcluded, kind }, point) =>
    isExcluded || kind === 'start-up' ? [{ point, reason: isExcluded ? 'excluded' : 'start-up' }] : [],
  )
  let chartDrawn: DrawnChart
  try {
    chartDrawn = drawChart(chartColumns(samples, chart), {
      chart,
      tests,
      leaveOut,
      phases: marks.map(({ from, label }) => ({ from, label })),
    })
  } catch (error) {
    if (error instanceof StatisticsError) return bare(error.message)
    throw error
  }
  const { phases, location, spread, signals } = answerOf(chartDrawn)
  return {
    phases: phases.map(({ from, to, label, center, sigmaWithin }, place) => ({
      from,
      to,
      label,
      startedAt: marks[place]?.startedAt ?? null,
      centerMg: center,
      sigmaWithinMg: sigmaWithin,
    })),
    location: panelOf(location),
    spread: spread && panelOf(spread),
    signals: signals.map(({ point, points, panel, test, name, sentence }) => ({ point, points, panel, test, name, sentence })),
    noLimitsBecause: null,
  }
}

const SPREAD_NAMES: Record<ChartKind, string> = {
  'xbar-r': 'Range within sample',
  'xbar-s': 'SD within sample',
  individuals: 'Moving range of means',
}

/** The control chart of a batch: phases at tooling changes and adjustments, limits by phase, signals, events, drift and the effect of the last change. */
export async function readBatchChart(actor: Actor, batchId: string, query: BatchChartQuery): Promise<BatchChart> {
  const batch = await presentBatch(await findBatch(actor, 'record:read', batchId))
  const samples = await chartRows(batchId)
  const events = await listEvents(actor, batchId)
  const { product, shellLot, controlPlan: plan, machine } = batch
  const isGross = plan.basis === 'gross'
  const basis = isGross ? 'gross' : plan.basis === 'net-individual' ? 'net-individual' : 'net-mean-tare'
  const chart = query.chart ?? (plan.chart === 'xbar-r' ? 'xbar-r' : plan.chart === 'individuals' ? 'individuals' : 'xbar-s')
  const targetMg = centreOf({ basis, targetFillMg: product.targetFillMg, tareMeanMg: shellLot.tareMeanMg })
  const shift = targetMg - product.targetFillMg
  const around = (percent: number): [number, number] => [
    targetMg - (percent / 100) * product.targetFillMg,
    targetMg + (percent / 100) * product.targetFillMg,
  ]
  const marks = phaseMarks(samples, events, batch.toolingSet.code === '' ? 'run' : `set ${batch.toolingSet.code}`)
  const alertMg = around(plan.meanAlertPercent)
  return {
    batch: {
      id: batch.id,
      number: batch.number,
      state: batch.state,
      machineCode: machine.code,
      productCode: product.code,
      productName: product.name,
      capsuleSize: product.capsuleSize,
      shellLotCode: shellLot.code,
      tareMeanMg: shellLot.tareMeanMg,
      toolingSetCode: batch.toolingSet.code,
      startedAt: batch.startedAt,
      endedAt: batch.endedAt,
      capsulesPerHour: batch.capsulesPerHour,
    },
    basis,
    chart,
    targetMg,
    specificationMg: [product.lowerSpecificationMg + shift, product.upperSpecificationMg + shift],
    alertMg,
    actionMg: around(plan.meanActionPercent),
    samples,
    ...drawn(samples, marks, chart, plan.runTests),
    spreadName: SPREAD_NAMES[chart],
    events,
    drift: driftOf(samples, marks, alertMg, batch.capsulesPerHour),
    change: changeEffect(samples, marks),
  }
}
