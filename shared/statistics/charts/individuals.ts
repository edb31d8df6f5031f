import { fitBaseline, type ChartKind } from './chart-kind.ts'
import { drawMeans, drawMovingRanges, movingRangePanelOf, panelOf } from './panel.ts'

/**
 * Single values and their moving ranges.
 *
 * Formula  x̄ ± 3σ with σ = mean moving range / d2(2) (so x̄ ± E2·MR, E2 = 2.66), or the median moving range / 0.954;
 *          moving ranges d2(2)·σ with upper limit D4·MR, lower limit 0. The first point of a phase has no moving range.
 * Assumes  independent values, about normal; a drift or a carry-over from one value to the next makes the limits wrong.
 * @see NIST/SEMATECH e-Handbook of Statistical Methods, 6.3.2.2; cases in fixtures/reference/charts.json
 */
export const individuals = {
  id: 'individuals',
  name: 'Single values and moving ranges',
  use: 'One value a point: a batch mean, an assay, a capsule at a time.',
  sizes: { min: 1, max: 1 },
  estimators: () => ['moving-range', 'median-moving-range'],
  panels: ({ columns }) => ({
    location: panelOf('value', 'normality', columns.mean),
    spread: movingRangePanelOf('moving range', columns.mean),
  }),
  fit: fitBaseline,
  limits: ({ location, spread }, samples, stretch, { center, sigmaWithin }) => {
    drawMeans(location, samples, stretch, center, sigmaWithin)
    if (spread) drawMovingRanges(spread, samples.columns.mean, stretch, sigmaWithin)
  },
} as const satisfies ChartKind
