import { fitBaseline, type ChartKind } from './chart-kind.ts'
import { drawMeans, drawRanges, panelOf, spreadPanelOf } from './panel.ts'

/**
 * Means and ranges of subgroups.
 *
 * Formula  x̿ ± 3σ/√n with σ = R̄/d2 (so A2·R̄); ranges d2·σ ± 3·d3·σ (so D3·R̄, D4·R̄), not below 0. Limits follow each
 *          subgroup's own size.
 * Assumes  independent values, alike and about normal within a subgroup, and no source of variation that acts only between
 *          subgroups: where there is one, the limits are too tight and the between/within chart is the honest one.
 * @see W. A. Shewhart, Economic Control of Quality of Manufactured Product (1931); ASTM Manual 7A; cases in fixtures/reference/charts.json
 */
export const xbarR = {
  id: 'xbar-r',
  name: 'Means and ranges',
  use: 'Subgroups of 2 to about 10 values: easy to check by hand.',
  sizes: { min: 2, max: 1000 },
  estimators: () => ['rbar', 'sbar', 'pooled'],
  panels: (samples) => ({
    location: panelOf('mean', 'normality', samples.columns.mean),
    spread: spreadPanelOf('range', samples.columns.range, samples),
  }),
  fit: fitBaseline,
  limits: ({ location, spread }, samples, stretch, { center, sigmaWithin }) => {
    drawMeans(location, samples, stretch, center, sigmaWithin)
    if (spread) drawRanges(spread, samples, stretch, sigmaWithin)
  },
} as const satisfies ChartKind
