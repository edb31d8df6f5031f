import type { BatchChart } from '#shared/schemas/batch-chart.ts'
import type { LineSeriesOption, SeriesOption } from 'echarts'
import type { ChartTokens } from './tokens.ts'

type Panel = 'location' | 'spread'
type MarkAreaItem = NonNullable<NonNullable<LineSeriesOption['markArea']>['data']>[number]

const timeOf = (chart: BatchChart, place: number): number => Date.parse(chart.samples[place]?.startedAt ?? '')

/** A limit holds from halfway to the point before until halfway to the point after, and never across a phase. */
function steps(chart: BatchChart, values: readonly (number | null)[]): [number, number | null][] {
  const data: [number, number | null][] = []
  for (const { from, to } of chart.phases) {
    for (let place = from; place < to; place++) {
      const value = values[place] ?? null
      const here = timeOf(chart, place)
      const left = place > from ? (timeOf(chart, place - 1) + here) / 2 : here
      const right = place < to - 1 ? (here + timeOf(chart, place + 1)) / 2 : here
      data.push([left, value], [right, value])
    }
    const last = data.at(-1)
    if (last) data.push([last[0], null])
  }
  return data
}

/** Centre and control limits of one panel, stepped, phase by phase. */
export function limitLines(chart: BatchChart, tokens: ChartTokens, grid: number, panel: Panel): SeriesOption[] {
  const lines = panel === 'location' ? chart.location : chart.spread
  if (!lines) return []
  const line = (name: string, values: readonly (number | null)[], type: 'solid' | 'dashed', opacity: number): SeriesOption => ({
    id: `${panel}-${name}`,
    name: `${panel} ${name}`,
    type: 'line',
    xAxisIndex: grid,
    yAxisIndex: grid,
    symbol: 'none',
    silent: true,
    animation: false,
    connectNulls: false,
    z: 3,
    lineStyle: { color: tokens.textThird, type, width: 1.2, opacity },
    data: steps(chart, values),
  })
  return [line('centre', lines.center, 'solid', 0.9), line('lower', lines.lower, 'dashed', 1), line('upper', lines.upper, 'dashed', 1)]
}

/** Phases as bands, every second one sunk; the border between two is the brass line of the change. */
export function phaseBands(chart: BatchChart, tokens: ChartTokens, from: number, to: number): SeriesOption {
  const starts = chart.phases.map((phase, place) =>
    place === 0 ? from : Date.parse(phase.startedAt ?? chart.samples[phase.from]?.startedAt ?? ''),
  )
  const bands = chart.phases.map(({ label }, place): MarkAreaItem => [
    {
      name: label,
      xAxis: starts[place] ?? from,
      itemStyle: { color: place % 2 === 0 ? tokens.raised : tokens.sunk, opacity: place % 2 === 0 ? 0.65 : 0.9 },
      label: { show: true, position: 'insideTopLeft', color: tokens.textSecond, fontSize: 12, distance: 8 },
    },
    { xAxis: starts[place + 1] ?? to },
  ])
  return {
    id: 'phases',
    type: 'line',
    data: [],
    xAxisIndex: 0,
    yAxisIndex: 0,
    silent: true,
    z: 0,
    markArea: { silent: true, animation: false, data: bands },
    markLine: {
      silent: true,
      symbol: 'none',
      animation: false,
      label: { show: false },
      lineStyle: { color: tokens.brass, width: 1.8, type: 'solid' },
      data: starts.slice(1).map((xAxis) => ({ xAxis })),
    },
  }
}
