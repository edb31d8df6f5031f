import { requireValues, StatisticsError } from './errors.ts'
import { momentsOf } from './summary.ts'

/**
 * Lag-1 autocorrelation: how much a value resembles the one before. Negative where somebody corrects too much.
 *
 * Formula  r₁ = Σ(xₜ − x̄)(xₜ₊₁ − x̄)/Σ(xₜ − x̄)².
 * @param values at least 3 finite numbers in order, not all equal
 * @throws {StatisticsError} `too-few-values`, `not-finite`, `no-variation`
 * @see NIST StRD univariate summary statistics (certified r1); fixtures/reference/autocorrelation.json
 */
export function lagOneAutocorrelation(values: ArrayLike<number>): number {
  requireValues('values', values, { min: 3 })
  const { mean, sumOfSquares } = momentsOf(values)
  if (!(sumOfSquares > 0)) throw new StatisticsError('no-variation', 'values', 'All values are equal, so they have no autocorrelation.')
  let products = 0
  for (let place = 1; place < values.length; place++) products += (values[place - 1]! - mean) * (values[place]! - mean)
  return products / sumOfSquares
}
