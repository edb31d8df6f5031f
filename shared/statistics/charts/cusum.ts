import type { Stretch } from '../baseline.ts'
import { estimatorsForAnySize, fitBaseline, type ChartKind, type PhaseFit, type PhaseSettings } from './chart-kind.ts'
import { panelOf, type CusumSums, type Panel } from './panel.ts'
import type { Samples } from './samples.ts'

/**
 * Two-sided tabular cumulative sum of subgroup means, with an optional head start.
 *
 * Formula  with σᵢ = σ/√nᵢ: Uᵢ = max(0, Uᵢ₋₁ + x̄ᵢ − T − kσᵢ), Lᵢ = max(0, Lᵢ₋₁ + T − x̄ᵢ − kσᵢ), U₀ = L₀ = headStart · σ₁;
 *          a signal where either is above hσᵢ. Where sizes differ the sum carried over is rescaled by σᵢ/σᵢ₋₁, which keeps it
 *          in sigmas of a mean. Sums are positive, in the unit of the values; k, h and headStart are multiples of σᵢ.
 *          Starts anew with each phase. The plotted point is the larger sum, the lower one drawn below zero.
 * Assumes  independent subgroups; the sums themselves are not independent, so only their decision value is tested.
 * @see E. S. Page, Biometrika 41 (1954) 100–115; J. M. Lucas, R. B. Crosier, Technometrics 24 (1982) 199–205 (head start);
 *      NIST/SEMATECH e-Handbook 6.3.2.3; cases in fixtures/reference/charts.json
 */
export const cusum = {
  id: 'cusum',
  name: 'Cumulative sums',
  use: 'Small shifts that last, with a known target; also tells when a shift began.',
  sizes: { min: 1, max: 1000 },
  estimators: estimatorsForAnySize,
  panels: ({ count }) => {
    const sums = { upper: new Float64Array(count), lower: new Float64Array(count), decision: new Float64Array(count) }
    return { location: { ...panelOf('cumulative sum', 'limits', new Float64Array(count)), sums } }
  },
  fit: fitBaseline,
  limits: ({ location }, samples, stretch, fit, settings) => {
    if (location.sums) drawSums(location, location.sums, samples, stretch, fit, settings)
  },
} as const satisfies ChartKind

function drawSums(
  panel: Panel,
  sums: CusumSums,
  { columns: { n, mean } }: Samples,
  { from, to }: Stretch,
  { center, sigmaWithin }: PhaseFit,
  { cusum: { k, h, headStart } }: PhaseSettings,
): void {
  let upper = (headStart * sigmaWithin) / Math.sqrt(n[from]!)
  let lower = upper
  for (let point = from; point < to; point++) {
    const sigma = sigmaWithin / Math.sqrt(n[point]!)
    const carried = point === from ? 1 : Math.sqrt(n[point - 1]! / n[point]!)
    const distance = mean[point]! - center
    upper = Math.max(0, upper * carried + distance - k * sigma)
    lower = Math.max(0, lower * carried - distance - k * sigma)
    sums.upper[point] = upper
    sums.lower[point] = lower
    sums.decision[point] = h * sigma
    panel.points[point] = upper >= lower ? upper : -lower
    panel.sigma[point] = sigma
    panel.lower[point] = -h * sigma
    panel.upper[point] = h * sigma
  }
}
