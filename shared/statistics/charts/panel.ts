import type { Stretch } from '../baseline.ts'
import { c4, d2, d3 } from '../control-factors.ts'
import type { Samples } from './samples.ts'

/**
 * What a run test may take for granted about the points of a panel; each word includes those before it.
 * `limits`: the limits hold point by point; `independence`: no point carries over into the next;
 * `symmetry`: about as many points fall above the centre as below; `normality`: the zones of 1 and 2 sigma mean what they say.
 */
export const ASSUMPTIONS = ['limits', 'independence', 'symmetry', 'normality'] as const
export type Assumption = (typeof ASSUMPTIONS)[number]

/** One of the panels of a control chart: what is plotted, and its lines, one figure a point. NaN stands for none. */
export interface Panel {
  /** What one point is, in the singular, for sentences. */
  noun: string
  grants: Assumption
  points: Float64Array
  center: Float64Array
  lower: Float64Array
  upper: Float64Array
  /** Standard deviation of the plotted point: the width of a zone. */
  sigma: Float64Array
  /** What tests of order compare: the points, or their distance from the centre in sigmas where the centre depends on the size. */
  ordered: Float64Array
  sums: CusumSums | undefined
}

/** The two sums of a CUSUM chart, both positive and in the unit of the values, and the decision value that neither may pass. */
export interface CusumSums {
  upper: Float64Array
  lower: Float64Array
  decision: Float64Array
}

/** The distance from the centre line to a limit, in standard deviations of the plotted point. */
export const LIMIT_WIDTH = 3

/** From this size on, ranges and standard deviations fall about evenly above and below their centre (common practice). */
const NEARLY_SYMMETRIC_FROM = 5

/** A panel over points that are there already, its lines still empty. */
export function panelOf(noun: string, grants: Assumption, points: Float64Array): Panel {
  const count = points.length
  return {
    noun,
    grants,
    points,
    center: new Float64Array(count),
    lower: new Float64Array(count),
    upper: new Float64Array(count),
    sigma: new Float64Array(count),
    ordered: points,
    sums: undefined,
  }
}

/** Ranges or standard deviations within subgroups. */
export function spreadPanelOf(noun: string, points: Float64Array, { smallest, largest }: Samples): Panel {
  const panel = panelOf(noun, smallest >= NEARLY_SYMMETRIC_FROM ? 'symmetry' : 'independence', points)
  return smallest === largest ? panel : { ...panel, ordered: new Float64Array(points.length) }
}

/** Distances between neighbours; neighbouring ones share a point, so only their limits can be tested. */
export function movingRangePanelOf(noun: string, values: Float64Array): Panel {
  const points = new Float64Array(values.length)
  return panelOf(noun, 'limits', points)
}

/** Means with limits at 3 · σ/√n, for each point its own n. */
export function drawMeans(panel: Panel, { columns }: Samples, stretch: Stretch, center: number, sigma: number): void {
  drawBySize(panel, columns.n, stretch, (n) => ({ center, sd: sigma / Math.sqrt(n) }), -Infinity)
}

/** Ranges within subgroups: centre d2 · σ, limits d2 · σ ± 3 · d3 · σ, never below zero. */
export function drawRanges(panel: Panel, { columns }: Samples, stretch: Stretch, sigma: number): void {
  drawBySize(panel, columns.n, stretch, (n) => ({ center: d2(n) * sigma, sd: d3(n) * sigma }), 0)
}

/** Standard deviations within subgroups: centre c4 · σ, limits c4 · σ ± 3 · σ · √(1 − c4²), never below zero. */
export function drawSds(panel: Panel, { columns }: Samples, stretch: Stretch, sigma: number): void {
  drawBySize(panel, columns.n, stretch, (n) => ({ center: c4(n) * sigma, sd: Math.sqrt(1 - c4(n) ** 2) * sigma }), 0)
}

/** Moving ranges of two neighbours, none at the first point of a phase; limits as those of ranges of two. */
export function drawMovingRanges(panel: Panel, values: Float64Array, stretch: Stretch, sigma: number): void {
  panel.points[stretch.from] = NaN
  for (let point = stretch.from + 1; point < stretch.to; point++) panel.points[point] = Math.abs(values[point]! - values[point - 1]!)
  fill(panel, stretch, { center: d2(2) * sigma, sd: d3(2) * sigma }, 0)
}

/** The same centre and limits for a whole stretch. */
export function fill(panel: Panel, { from, to }: Stretch, { center, sd }: { center: number; sd: number }, floor: number): void {
  panel.center.fill(center, from, to)
  panel.sigma.fill(sd, from, to)
  panel.lower.fill(Math.max(floor, center - LIMIT_WIDTH * sd), from, to)
  panel.upper.fill(center + LIMIT_WIDTH * sd, from, to)
}

/** Fills a stretch in runs of equal size, so that the factors are looked up once a run and equal sizes cost one fill a column. */
function drawBySize(
  panel: Panel,
  n: Float64Array,
  { from, to }: Stretch,
  linesFor: (n: number) => { center: number; sd: number },
  floor: number,
): void {
  let start = from
  while (start < to) {
    let end = start + 1
    while (end < to && n[end] === n[start]) end++
    fill(panel, { from: start, to: end }, linesFor(n[start]!), floor)
    start = end
  }
  if (panel.ordered === panel.points) return
  for (let point = from; point < to; point++) {
    panel.ordered[point] = (panel.points[point]! - panel.center[point]!) / panel.sigma[point]!
  }
}
