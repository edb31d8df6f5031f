import { fitBaseline, type ChartKind } from './chart-kind.ts'
import { drawMeans, drawSds, panelOf, spreadPanelOf } from './panel.ts'

/**
 * Means and standard deviations of subgroups.
 *
 * Formula  x̿ ± 3σ/√n with σ = s̄/c4 (so A3·s̄); standard deviations c4·σ ± 3σ√(1 − c4²) (so B3·s̄, B4·s̄, or B5·σ, B6·σ for a
 *          known sigma), not below 0. Limits follow each subgroup's own size.
 * Assumes  what the chart of means and ranges assumes; uses all values of a subgroup, not only its two ends.
 * @see ASTM Manual 7A; ISO 7870-2:2013 (cited from memory); cases in fixtures/reference/charts.json
 */
export const xbarS = {
  id: 'xbar-s',
  name: 'Means and standard deviations',
  use: 'Subgroups of about 10 values or more, or of sizes that differ.',
  sizes: { min: 2, max: 1000 },
  estimators: () => ['sbar', 'rbar', 'pooled'],
  panels: (samples) => ({
    location: panelOf('mean', 'normality', samples.columns.mean),
    spread: spreadPanelOf('standard deviation', samples.columns.sd, samples),
  }),
  fit: fitBaseline,
  limits: ({ location, spread }, samples, stretch, { center, sigmaWithin }) => {
    drawMeans(location, samples, stretch, center, sigmaWithin)
    if (spread) drawSds(spread, samples, stretch, sigmaWithin)
  },
} as const satisfies ChartKind
