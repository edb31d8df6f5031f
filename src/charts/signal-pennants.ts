import type { BatchChart } from '#shared/schemas/batch-chart.ts'
import type { SeriesOption } from 'echarts'
import type { ChartTokens } from './tokens.ts'

const PENNANT_HEIGHT = 16

/** The signals of the location panel, the last of each name: a run that goes on is one pennant, not ten. */
function lastOfEachName(chart: BatchChart): BatchChart['signals'] {
  const seen = new Map<string, BatchChart['signals'][number]>()
  for (const signal of chart.signals) {
    if (signal.panel !== 'location') continue
    const phase = chart.phases.findIndex(({ from, to }) => signal.point >= from && signal.point < to)
    seen.set(`${phase} ${signal.name}`, signal)
  }
  return [...seen.values()].toSorted((a, b) => a.point - b.point)
}

/** A pennant with a plain name at the point that completes a pattern; the points that make it up are joined by a band. */
export function signalPennants(chart: BatchChart, tokens: ChartTokens, grid: number): SeriesOption[] {
  const signals = lastOfEachName(chart)
  const timeAt = (place: number): number => Date.parse(chart.samples[place]?.startedAt ?? '')
  const bands: SeriesOption[] = signals.map((signal, place) => ({
    id: `band-${place}`,
    type: 'line',
    xAxisIndex: grid,
    yAxisIndex: grid,
    symbol: 'none',
    silent: true,
    animation: false,
    z: 4,
    lineStyle: { color: tokens.alertMark, width: 9, opacity: 0.3, cap: 'round', join: 'round' },
    data: signal.points.map((point) => [timeAt(point), chart.location.points[point] ?? null]),
  }))
  const pennants: SeriesOption = {
    id: 'pennants',
    name: 'signals',
    type: 'custom',
    xAxisIndex: grid,
    yAxisIndex: grid,
    silent: true,
    animation: false,
    clip: false,
    z: 8,
    data: signals.map(({ point }) => [timeAt(point), chart.location.points[point] ?? 0]),
    renderItem: (params, api) => {
      const signal = signals[params.dataIndex]
      const place = api.coord([api.value(0), api.value(1)])
      const x = place[0] ?? 0
      const y = place[1] ?? 0
      const width = (signal?.name.length ?? 0) * 6.4 + 18
      // Pennants take turns below and above their point, and point back from the right edge, so that they stay apart.
      const isAbove = params.dataIndex % 2 === 1
      const top = isAbove ? y - 22 - PENNANT_HEIGHT : y + 22
      const flip = x + width > api.getWidth() - 24
      const left = flip ? x - width : x
      const notch = flip ? left : left + width
      const inner = flip ? left + 7 : left + width - 7
      return {
        type: 'group',
        children: [
          {
            type: 'line',
            shape: { x1: x, y1: y, x2: x, y2: isAbove ? top : top + PENNANT_HEIGHT },
            style: { stroke: tokens.alertText, lineWidth: 1.4 },
          },
          {
            type: 'polygon',
            shape: {
              points: [
                [x, top],
                [notch, top],
                [inner, top + PENNANT_HEIGHT / 2],
                [notch, top + PENNANT_HEIGHT],
                [x, top + PENNANT_HEIGHT],
              ],
            },
            style: { fill: tokens.alertText },
          },
          {
            type: 'text',
            style: {
              text: signal?.name ?? '',
              x: flip ? inner + 4 : left + 7,
              y: top + 2.5,
              fill: tokens.ground,
              font: '600 11px Inter Variable, sans-serif',
            },
          },
        ],
      }
    },
  }
  return [...bands, pennants]
}
