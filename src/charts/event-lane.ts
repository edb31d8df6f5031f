import type { BatchChart } from '#shared/schemas/batch-chart.ts'
import type { SeriesOption } from 'echarts'
import { EVENT_WORDS } from '@/format/word.ts'
import type { ChartTokens } from './tokens.ts'

type Event = BatchChart['events'][number]

/** Brass is for what was done to the machine itself; all else stays faint. */
export const isMachineChange = ({ kind }: Event): boolean => kind === 'changeover' || kind === 'adjustment'

/** An event in a few words: "station 4 +1.0 mm", "shell lot 8813". */
export function eventText({ kind, station, setting, valueFrom, valueTo, unit, label }: Event): string {
  if (kind === 'adjustment') {
    const moved = (valueTo ?? 0) - (valueFrom ?? 0)
    const what = station === null ? (setting ?? '').replace('-', ' ') : `station ${station}`
    return `${what} ${moved < 0 ? '−' : '+'}${Math.abs(moved).toFixed(1)} ${unit ?? ''}`
  }
  if (kind === 'speed') return `speed ${valueFrom ?? ''} to ${valueTo ?? ''}`
  const word = EVENT_WORDS[kind].toLowerCase()
  if (label === '') return word
  return label.toLowerCase().startsWith(word) || kind === 'blend-container' || kind === 'start' ? label.toLowerCase() : `${word} ${label}`
}

/** The events of a run as diamonds on their own lane of the time axis. */
export function eventLane(chart: BatchChart, tokens: ChartTokens, grid: number, isNarrow: boolean): SeriesOption {
  return {
    id: 'events',
    name: 'events',
    type: 'scatter',
    xAxisIndex: grid,
    yAxisIndex: grid,
    symbol: 'diamond',
    symbolSize: 11,
    animation: false,
    clip: false,
    labelLayout: { hideOverlap: true },
    data: chart.events.map((event) => ({
      value: [Date.parse(event.happenedAt), 0],
      name: eventText(event),
      itemStyle: isMachineChange(event)
        ? { color: tokens.brass }
        : { color: tokens.ground, borderColor: tokens.textThird, borderWidth: 1.4 },
      label: {
        show: !isNarrow,
        position: 'right',
        distance: 4,
        formatter: eventText(event),
        color: isMachineChange(event) ? tokens.brass : tokens.textSecond,
        fontWeight: isMachineChange(event) ? 650 : 400,
        fontSize: 12,
      },
    })),
  }
}
