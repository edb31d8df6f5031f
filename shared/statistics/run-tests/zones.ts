import type { Stretch } from '../baseline.ts'
import type { Panel } from '../charts/panel.ts'
import { pointsUpTo, type Hit, type RunTest, type Side } from './run-test.ts'

/**
 * Points beyond a zone line that complete "`needed` of `needed` + 1 beyond it on one side". A point inside never completes
 * the pattern, a point exactly on the line is inside, and the window is shorter where the stretch begins.
 * @param zone the line, in sigmas from the centre
 * @param needed points beyond it, at most 29
 */
export function mostBeyond({ points, center, sigma }: Panel, { from, to }: Stretch, zone: number, needed: number): Hit[] {
  const hits: Hit[] = []
  const above = new Window(needed)
  const below = new Window(needed)
  for (let point = from; point < to; point++) {
    const reach = zone * sigma[point]!
    if (points[point]! > center[point]! + reach) above.add(point, 'above', hits)
    else if (points[point]! < center[point]! - reach) below.add(point, 'below', hits)
  }
  return hits
}

/** Which of the last `needed` + 1 points were beyond on one side, one bit a point, the newest lowest; moved only when one is. */
class Window {
  private seen = 0
  private newest = -Infinity
  private readonly width: number
  private readonly mask: number

  constructor(private readonly needed: number) {
    this.width = needed + 1
    this.mask = 2 ** this.width - 1
  }

  add(point: number, side: Side, hits: Hit[]): void {
    const passed = point - this.newest
    const kept = passed < this.width ? (this.seen << passed) & this.mask : 0
    this.seen = kept | 1
    this.newest = point
    if (bitsIn(this.seen) < this.needed) return
    hits.push({ point, points: pointsUpTo(point, this.width).filter((each) => (this.seen >> (point - each)) & 1), side })
  }
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
