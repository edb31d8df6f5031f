import type { Stretch } from '../baseline.ts'
import type { Panel } from '../charts/panel.ts'
import { pointsUpTo, type Hit, type RunTest, type Side } from './run-test.ts'

/**
 * Points beyond a zone line that complete "`needed` of `needed` + 1 beyond it on one side". A point inside never completes
 * the pattern, a point exactly on the line is inside, and the window is shorter where the stretch begins.
 * @param zone the line, in sigmas from the centre
 * @param needed points beyond it, at most 30
 */
export function mostBeyond(panel: Panel, { from, to }: Stretch, zone: number, needed: number): Hit[] {
  const { points, center, sigma } = panel
  const window = 2 ** (needed + 1) - 1
  const hits: Hit[] = []
  let above = 0
  let below = 0
  for (let point = from; point < to; point++) {
    const middle = center[point]!
    const reach = zone * sigma[point]!
    const isAbove = points[point]! > middle + reach
    const isBelow = points[point]! < middle - reach
    // One bit a point, the newest lowest: the window slides by a shift.
    above = ((above << 1) | Number(isAbove)) & window
    below = ((below << 1) | Number(isBelow)) & window
    if (isAbove && bitsIn(above) >= needed) hits.push(hitOf(point, above, needed, 'above'))
    if (isBelow && bitsIn(below) >= needed) hits.push(hitOf(point, below, needed, 'below'))
  }
  return hits
}

/** What tests of a zone say: the name and the sentence differ by the zone alone. */
export function zoneTest(zone: number): Pick<RunTest, 'needs' | 'detect'> {
  return { needs: 'normality', detect: (panel, stretch, length) => mostBeyond(panel, stretch, zone, length) }
}

function bitsIn(mask: number): number {
  let bits = 0
  for (let left = mask; left !== 0; left &= left - 1) bits++
  return bits
}

function hitOf(point: number, mask: number, needed: number, side: Side): Hit {
  return { point, points: pointsUpTo(point, needed + 1).filter((each) => (mask >> (point - each)) & 1), side }
}
