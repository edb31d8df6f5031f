import type { Stretch } from '../baseline.ts'
import { estimatorsForAnySize, fitBaseline, type ChartKind, type PhaseFit, type PhaseSettings } from './chart-kind.ts'
import { panelOf, type Panel } from './panel.ts'
import type { Samples } from './samples.ts'

/**
 * Exponentially weighted moving average of subgroup means.
 *
 * Formula  z₀ = centre, zᵢ = λx̄ᵢ + (1 − λ)zᵢ₋₁; limits centre ± L√vᵢ with v₀ = 0, vᵢ = λ²σ²/nᵢ + (1 − λ)²vᵢ₋₁: the exact
 *          variance for any sizes, so limits that widen; with equal n it is σ²/n · λ/(2 − λ) · (1 − (1 − λ)²ⁱ).
 *          Starts anew with each phase.
 * Assumes  independent subgroups; the weighted means themselves are not independent, so only their limits are tested.
 * @see S. W. Roberts, Technometrics 1 (1959) 239–250; NIST/SEMATECH e-Handbook 6.3.2.4; cases in fixtures/reference/charts.json
 */
export const ewma = {
  id: 'ewma',
  name: 'Weighted moving average',
  use: 'Small shifts of the mean, half to one and a half sigma of a mean, that last.',
  sizes: { min: 1, max: 1000 },
  estimators: estimatorsForAnySize,
  panels: ({ count }) => ({ location: panelOf('weighted mean', 'limits', new Float64Array(count)) }),
  fit: fitBaseline,
  limits: ({ location }, samples, stretch, fit, settings) => drawWeightedMeans(location, samples, stretch, fit, settings),
} as const satisfies ChartKind

function drawWeightedMeans(panel: Panel, { columns }: Samples, { from, to }: Stretch, fit: PhaseFit, { ewma }: PhaseSettings): void {
  const { center, sigmaWithin } = fit
  const { lambda, width } = ewma
  const rest = 1 - lambda
  let weighted = center
  let variance = 0
  for (let point = from; point < to; point++) {
    weighted = lambda * columns.mean[point]! + rest * weighted
    variance = (lambda * lambda * sigmaWithin * sigmaWithin) / columns.n[point]! + rest * rest * variance
    const sigma = Math.sqrt(variance)
    panel.points[point] = weighted
    panel.center[point] = center
    panel.sigma[point] = sigma
    panel.lower[point] = center - width * sigma
    panel.upper[point] = center + width * sigma
  }
}
