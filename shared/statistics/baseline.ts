import type { SubgroupColumns } from './subgroups.ts'

/** Points from `from` up to, not with, `to`, counted from 0. */
export interface Stretch {
  from: number
  to: number
}

/** The points from which the limits of a phase are worked out. */
export interface Baseline extends Stretch {
  /** 1 at a point that is left out; undefined when none is. */
  leftOut: Uint8Array | undefined
}

/**
 * Whether a point counts for the limits.
 * @param baseline the phase and what is left out of it
 * @param point a place in the columns, from 0
 */
export function isUsed({ leftOut }: Baseline, point: number): boolean {
  return leftOut?.[point] !== 1
}

/**
 * The number of points that count.
 * @param baseline the phase and what is left out of it
 */
export function countUsed(baseline: Baseline): number {
  let used = 0
  for (let point = baseline.from; point < baseline.to; point++) if (isUsed(baseline, point)) used++
  return used
}

/**
 * The mean of all values of the baseline, so that a subgroup weighs as many values as it holds.
 *
 * Formula  x̿ = Σ nᵢ·x̄ᵢ / Σ nᵢ, taken from the first mean on, which keeps the digits of large, alike values.
 * @param columns of the whole chart, one unit
 * @param baseline the phase and what is left out of it
 * @returns the mean in the unit of the values; NaN, meaning none, when every point is left out
 */
export function baselineMean({ n, mean }: SubgroupColumns, baseline: Baseline): number {
  const start = mean[baseline.from]!
  let values = 0
  let shifted = 0
  for (let point = baseline.from; point < baseline.to; point++) {
    if (!isUsed(baseline, point)) continue
    values += n[point]!
    shifted += n[point]! * (mean[point]! - start)
  }
  return start + shifted / values
}
