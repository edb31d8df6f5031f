import type { Baseline } from '../baseline.ts'
import { estimateSigma } from '../sigma.ts'
import { fitBaseline, type ChartKind, type PhaseFit, type PhaseSettings } from './chart-kind.ts'
import { drawMovingRanges, drawRanges, fill, movingRangePanelOf, panelOf, spreadPanelOf } from './panel.ts'
import type { Samples } from './samples.ts'

/**
 * Subgroup means judged by how they move from one to the next, beside the ranges within subgroups.
 *
 * Formula  means: x̿ ± 3·σ(x̄), σ(x̄) = mean moving range of the means / d2(2); moving ranges as on a chart of single values;
 *          ranges within: d2·σ ± 3·d3·σ with σ = R̄/d2. Variance between subgroups = σ(x̄)² − σ²·mean(1/n), not below 0.
 * Assumes  independent subgroups of about the same size: the limits of the means do not follow the size. Capsules of one sample
 *          are alike while samples differ (refill, bed), so limits from the spread within alone would be too tight.
 * @see D. J. Wheeler, three-way chart (cited from memory); cases in fixtures/reference/charts.json
 */
export const betweenWithin = {
  id: 'between-within',
  name: 'Between and within',
  use: 'Samples whose values are alike while the samples themselves differ, as capsules of one segment are.',
  sizes: { min: 2, max: 1000 },
  estimators: () => ['rbar', 'sbar', 'pooled'],
  panels: (samples) => ({
    location: panelOf('mean', 'normality', samples.columns.mean),
    spread: spreadPanelOf('range', samples.columns.range, samples),
    between: movingRangePanelOf('moving range of means', samples.columns.mean),
  }),
  fit: fitMeans,
  limits: ({ location, spread, between }, samples, stretch, { center, sigmaWithin, sigmaOfMeans = NaN }) => {
    fill(location, stretch, { center, sd: sigmaOfMeans }, -Infinity)
    if (spread) drawRanges(spread, samples, stretch, sigmaWithin)
    if (between) drawMovingRanges(between, samples.columns.mean, stretch, sigmaOfMeans)
  },
} as const satisfies ChartKind

function fitMeans(samples: Samples, baseline: Baseline, settings: PhaseSettings): PhaseFit {
  const sigmaOfMeans = settings.sigmaOfMeans ?? estimateSigma('moving-range', samples.columns, baseline)
  return { ...fitBaseline(samples, baseline, settings), sigmaOfMeans }
}
