import type { Panel } from '../charts/panel.ts'
import type { Hit, RunTest } from './run-test.ts'

/**
 * One point beyond a limit, strictly; a point exactly on it is within.
 * @see W. A. Shewhart (1931); L. S. Nelson, Journal of Quality Technology 16 (1984) 237–239, test 1
 */
export const beyondLimits: RunTest = {
  number: 1,
  title: 'A point beyond its limits',
  needs: 'limits',
  length: { usual: 1, min: 1, max: 1 },
  detect: ({ points, lower, upper }, { from, to }) => {
    const hits: Hit[] = []
    for (let point = from; point < to; point++) {
      if (points[point]! > upper[point]!) hits.push({ point, points: [point], side: 'above' })
      else if (points[point]! < lower[point]!) hits.push({ point, points: [point], side: 'below' })
    }
    return hits
  },
  name: () => 'outside',
  sentence: ({ point, side }, panel) => {
    const limit = side === 'above' ? panel.upper[point]! : panel.lower[point]!
    const place = side === 'above' ? 'above its upper' : 'below its lower'
    return `This ${panel.noun} lies ${place} limit: ${figure(panel, point, panel.points[point]!)} against ${figure(panel, point, limit)}.`
  },
}

/** A figure with as many decimals as its sigma makes worth reading: two significant places of sigma. */
function figure({ sigma }: Panel, point: number, value: number): string {
  const width = sigma[point]!
  if (!(width > 0)) return String(value)
  return value.toFixed(Math.min(20, Math.max(0, 1 - Math.floor(Math.log10(width)))))
}
