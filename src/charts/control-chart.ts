import type { BatchChart } from '#shared/schemas/batch-chart.ts'
import type { EChartsOption, LineSeriesOption, SeriesOption } from 'echarts'
import { formatClock } from '@/format/time.ts'
import { eventLane } from './event-lane.ts'
import { limitLines, phaseBands } from './phase-lines.ts'
import { signalPennants } from './signal-pennants.ts'
import type { ChartTokens } from './tokens.ts'

export interface ControlChartInput {
  chart: BatchChart
  tokens: ChartTokens
  timeZone: string
  /** Index of the sample that the keyboard or the pointer is on. */
  focused: number | undefined
  isNarrow: boolean
}

/** The three panels share one time axis: location over spread over events. */
const GRIDS = { location: 0, spread: 1, events: 2 } as const

type MarkLineItem = NonNullable<NonNullable<LineSeriesOption['markLine']>['data']>[number]
type MarkAreaItem = NonNullable<NonNullable<LineSeriesOption['markArea']>['data']>[number]

const timeOf = ({ startedAt }: BatchChart['samples'][number]): number => Date.parse(startedAt)

/** The extremes of what must be seen: points, limits, alert lines and the target, with a little air. */
function locationRange({ location, alertMg, targetMg }: BatchChart): [number, number] {
  const values = [...location.points, ...location.lower, ...location.upper, ...alertMg, targetMg].filter((value) => value !== null)
  const low = Math.min(...values)
  const high = Math.max(...values)
  const air = (high - low) * 0.12 || 1
  return [Math.floor(low - air), Math.ceil(high + air)]
}

function pointSeries(
  { chart, tokens, focused }: ControlChartInput,
  name: string,
  values: readonly (number | null)[],
  grid: number,
): SeriesOption {
  const hit = new Set(chart.signals.map(({ point }) => point))
  return {
    id: name,
    name,
    type: 'line',
    xAxisIndex: grid,
    yAxisIndex: grid,
    symbol: 'circle',
    symbolSize: (_value: unknown, { dataIndex }: { dataIndex: number }) => (dataIndex === focused ? 13 : hit.has(dataIndex) ? 9 : 7),
    showAllSymbol: chart.samples.length <= 400,
    sampling: 'minmax',
    lineStyle: { width: 1.4, color: tokens.data },
    itemStyle: { color: tokens.data, borderColor: tokens.ground, borderWidth: 1 },
    emphasis: { disabled: true },
    animation: false,
    z: 5,
    data: chart.samples.map((sample, place) => ({
      value: [timeOf(sample), values[place] ?? null],
      itemStyle:
        sample.isExcluded || sample.kind === 'start-up' ? { color: tokens.ground, borderColor: tokens.data, borderWidth: 1.6 } : {},
    })),
  }
}

/** Specification as outer zones, alert lines dotted, the target a solid line in ink. */
function fixedLines({ chart, tokens }: ControlChartInput, [low, high]: [number, number]): SeriesOption {
  const [lower, upper] = chart.specificationMg
  const line = (yAxis: number, color: string, type: 'solid' | 'dotted', label: string): MarkLineItem => ({
    yAxis,
    lineStyle: { color, type, width: type === 'solid' ? 1.2 : 1.4 },
    label: { show: true, formatter: label, position: 'insideEndTop', color, fontSize: 11 },
  })
  const zone = (from: number, to: number): MarkAreaItem => [
    { yAxis: from, itemStyle: { color: tokens.action, opacity: 0.1 } },
    { yAxis: to },
  ]
  return {
    id: 'fixed',
    type: 'line',
    data: [],
    xAxisIndex: GRIDS.location,
    yAxisIndex: GRIDS.location,
    silent: true,
    markLine: {
      silent: true,
      symbol: 'none',
      animation: false,
      data: [
        line(chart.targetMg, tokens.text, 'solid', 'target'),
        line(chart.alertMg[0], tokens.alertText, 'dotted', 'alert'),
        line(chart.alertMg[1], tokens.alertText, 'dotted', 'alert'),
      ],
    },
    markArea: {
      silent: true,
      animation: false,
      data: [...(low < lower ? [zone(low, lower)] : []), ...(high > upper ? [zone(upper, high)] : [])],
    },
  }
}

/** The drift since the last change, drawn over its own samples with the scatter about it. */
function driftSeries({ chart, tokens }: ControlChartInput): SeriesOption[] {
  const { drift, samples } = chart
  const phase = drift ? samples.slice(drift.fromPoint).filter(({ kind, isExcluded }) => kind !== 'start-up' && !isExcluded) : []
  const [first] = phase
  const last = phase.at(-1)
  if (!drift || drift.limitMg === null || !first || !last) return []
  const at = (sample: typeof first): number => drift.interceptMg + (drift.perHour * (timeOf(sample) - timeOf(first))) / 3_600_000
  return [
    {
      id: 'drift',
      name: 'drift',
      type: 'line',
      xAxisIndex: GRIDS.location,
      yAxisIndex: GRIDS.location,
      symbol: 'none',
      silent: true,
      animation: false,
      z: 4,
      lineStyle: { color: tokens.brass, width: 2.4 },
      data: [
        [timeOf(first), at(first)],
        [timeOf(last), at(last)],
      ],
    },
  ]
}

/** The option of the signature chart: pure, from the data to what is drawn. */
export function controlChartOption(input: ControlChartInput): EChartsOption {
  const { chart, tokens, timeZone, isNarrow } = input
  const range = locationRange(chart)
  const text = { color: tokens.textSecond, fontSize: 12, fontFamily: 'Inter Variable, sans-serif' }
  const times = chart.samples.map(timeOf)
  const eventTimes = chart.events.map(({ happenedAt }) => Date.parse(happenedAt))
  const from = Math.min(...times, ...(chart.batch.startedAt ? [Date.parse(chart.batch.startedAt)] : []))
  const to = Math.max(...times, ...eventTimes)
  const air = Math.max(60_000, (to - from) * 0.02)
  const left = isNarrow ? 46 : 58
  const right = isNarrow ? 14 : 26
  const xAxis = (gridIndex: number, isLast: boolean): object => ({
    type: 'time',
    gridIndex,
    min: from - air,
    max: to + air,
    axisLine: { lineStyle: { color: tokens.hairline } },
    axisTick: { show: isLast, lineStyle: { color: tokens.hairline } },
    splitLine: { show: false },
    axisLabel: { ...text, show: isLast, hideOverlap: true, formatter: (value: number) => formatClock(value, timeZone) },
    axisPointer: { show: true, lineStyle: { color: tokens.textThird, type: 'solid', width: 1 }, label: { show: false } },
  })
  const yAxis = (gridIndex: number, name: string, limits: object): object => ({
    type: 'value',
    gridIndex,
    name,
    nameLocation: 'end',
    nameGap: 10,
    nameTextStyle: { color: tokens.text, fontSize: 12, fontWeight: 650, align: 'left', padding: [0, 0, 0, -left + 12] },
    axisLabel: {
      ...text,
      showMinLabel: gridIndex !== GRIDS.location,
      showMaxLabel: false,
      formatter: (value: number) => value.toFixed(gridIndex === GRIDS.location ? 0 : 1),
    },
    splitLine: { show: false },
    axisLine: { show: false },
    axisTick: { show: false },
    ...limits,
  })
  return {
    animation: false,
    aria: { enabled: false },
    textStyle: { fontFamily: 'Inter Variable, sans-serif' },
    axisPointer: { link: [{ xAxisIndex: 'all' }] },
    grid: [
      { left, right, top: 28, height: '50%', containLabel: false },
      { left, right, top: '61%', height: '20%' },
      { left, right, top: '87%', height: 16 },
    ],
    xAxis: [xAxis(0, false), xAxis(1, false), xAxis(2, true)],
    yAxis: [
      yAxis(GRIDS.location, 'Sample mean, mg', { min: range[0], max: range[1] }),
      yAxis(GRIDS.spread, `${chart.spreadName}, mg`, { min: 0, splitNumber: 3 }),
      { type: 'value', gridIndex: GRIDS.events, min: -1, max: 1, show: false },
    ],
    dataZoom: [{ type: 'inside', xAxisIndex: [0, 1, 2], filterMode: 'none', zoomOnMouseWheel: 'ctrl', moveOnMouseMove: true }],
    series: [
      phaseBands(chart, tokens, from - air, to + air),
      fixedLines(input, range),
      ...limitLines(chart, tokens, GRIDS.location, 'location'),
      ...limitLines(chart, tokens, GRIDS.spread, 'spread'),
      ...driftSeries(input),
      pointSeries(input, 'location', chart.location.points, GRIDS.location),
      pointSeries(input, 'spread', chart.spread?.points ?? [], GRIDS.spread),
      ...signalPennants(chart, tokens, GRIDS.location),
      eventLane(chart, tokens, GRIDS.events, isNarrow),
    ],
  }
}
