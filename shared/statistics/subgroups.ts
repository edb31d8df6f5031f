import { StatisticsError } from './errors.ts'
import type { Moments } from './summary.ts'

/** Weights in the order of weighing: one flat column, and where each subgroup begins in it. */
export interface Subgroups {
  values: Float64Array
  /** One more than there are subgroups: subgroup i holds the values from `offsets[i]` up to, not with, `offsets[i + 1]`. */
  offsets: Uint32Array
}

/** What a control chart needs to know of each subgroup, a column a quantity; a stored sample carries the same figures. */
export interface SubgroupColumns {
  n: Float64Array
  mean: Float64Array
  /** Standard deviation with the divisor n − 1; NaN, meaning none, where a subgroup holds one value. */
  sd: Float64Array
  range: Float64Array
  min: Float64Array
  max: Float64Array
}

/** The largest value, without its sign, that a chart takes: squares of larger ones, summed over a million, leave the range of a number. */
export const LARGEST_MAGNITUDE = 1e150

/**
 * Lays subgroups end to end in one column.
 * @param subgroups at least one, each with at least one finite number; sizes may differ
 * @throws {StatisticsError} `too-few-values`, `not-finite`, `out-of-range` (beyond 1e150)
 */
export function flattenSubgroups(subgroups: readonly ArrayLike<number>[]): Subgroups {
  const offsets = new Uint32Array(subgroups.length + 1)
  for (let i = 0; i < subgroups.length; i++) offsets[i + 1] = offsets[i]! + subgroups[i]!.length
  const values = new Float64Array(offsets[subgroups.length]!)
  for (let i = 0; i < subgroups.length; i++) values.set(subgroups[i]!, offsets[i])
  return { values, offsets }
}

/**
 * Cuts one column into subgroups of the same size, without copying it.
 * @param values as many finite numbers as fill whole subgroups
 * @param size values a subgroup
 * @throws {StatisticsError} `lengths-differ` when a remainder is left over
 */
export function subgroupsOfSize(values: Float64Array, size: number): Subgroups {
  const count = values.length / size
  if (!Number.isInteger(count)) {
    throw new StatisticsError('lengths-differ', 'values', `${values.length} values do not make whole subgroups of ${size}.`)
  }
  const offsets = new Uint32Array(count + 1)
  for (let i = 1; i <= count; i++) offsets[i] = i * size
  return { values, offsets }
}

/**
 * n, mean, SD, range, min and max of every subgroup: one pass over the weights, one allocation a column.
 *
 * Formula  mean = x₁ + Σ(x − x₁)/n, SD = √(Σ(x − mean)²/(n − 1)), range = max − min. Taking the first value off keeps the
 *          digits that a plain sum of large, alike values would lose, and makes the mean of equal values that value exactly.
 * @param subgroups at least one, each with at least one value, one unit
 * @throws {StatisticsError} `too-few-values`, `not-finite`, `out-of-range` (beyond 1e150)
 */
export function summariseSubgroups({ values, offsets }: Subgroups): SubgroupColumns {
  const count = offsets.length - 1
  if (count < 1) throw new StatisticsError('too-few-values', 'subgroups', 'subgroups needs at least one subgroup, but has none.')
  const columns = emptyColumns(count)
  for (let i = 0; i < count; i++) {
    if (!summariseOne(values, offsets[i]!, offsets[i + 1]!, columns, i)) throw whatIsWrong(values, offsets, i)
  }
  return columns
}

/** Columns of zeros, to be filled from weights or from stored samples. */
export function emptyColumns(count: number): SubgroupColumns {
  return {
    n: new Float64Array(count),
    mean: new Float64Array(count),
    sd: new Float64Array(count),
    range: new Float64Array(count),
    min: new Float64Array(count),
    max: new Float64Array(count),
  }
}

/**
 * The moments of all values together, from the figures of their subgroups: the spread between subgroups and within them.
 *
 * Formula  mean = Σ nᵢx̄ᵢ/Σ nᵢ; S = Σ (nᵢ − 1)sᵢ² + Σ nᵢ(x̄ᵢ − mean)². What {@link mergeMoments} gives, in two short passes.
 * @param columns of at least one subgroup, one unit
 */
export function momentsOfSubgroups({ n, mean, sd, min, max }: SubgroupColumns): Moments {
  const first = mean[0]!
  let values = 0
  let shifted = 0
  let lowest = Infinity
  let highest = -Infinity
  for (let i = 0; i < n.length; i++) {
    values += n[i]!
    shifted += n[i]! * (mean[i]! - first)
    if (min[i]! < lowest) lowest = min[i]!
    if (max[i]! > highest) highest = max[i]!
  }
  const overall = first + shifted / values
  let sumOfSquares = 0
  for (let i = 0; i < n.length; i++) {
    const distance = mean[i]! - overall
    sumOfSquares += n[i]! * distance * distance
    if (n[i]! > 1) sumOfSquares += (n[i]! - 1) * sd[i]! * sd[i]!
  }
  return { n: values, mean: overall, sumOfSquares, min: lowest, max: highest }
}

/** Fills row i of the columns; false when the subgroup is empty or holds a value that no chart can take. */
function summariseOne(values: Float64Array, from: number, to: number, columns: SubgroupColumns, i: number): boolean {
  const n = to - from
  const first = values[from]!
  let min = first
  let max = first
  let shifted = 0
  for (let place = from; place < to; place++) {
    const value = values[place]!
    min = value < min ? value : min
    max = value > max ? value : max
    shifted += value - first
  }
  const mean = first + shifted / n
  let sumOfSquares = 0
  for (let place = from; place < to; place++) {
    const distance = values[place]! - mean
    sumOfSquares += distance * distance
  }
  columns.n[i] = n
  columns.mean[i] = mean
  columns.sd[i] = n > 1 ? Math.sqrt(sumOfSquares / (n - 1)) : NaN
  columns.range[i] = max - min
  columns.min[i] = min
  columns.max[i] = max
  // One NaN or infinity makes the mean one too, and an empty subgroup has no first value: a single comparison finds all of them.
  return min >= -LARGEST_MAGNITUDE && max <= LARGEST_MAGNITUDE && mean - mean === 0
}

function whatIsWrong(values: Float64Array, offsets: Uint32Array, i: number): StatisticsError {
  const subgroup = values.subarray(offsets[i], offsets[i + 1])
  if (subgroup.length === 0) return new StatisticsError('too-few-values', `subgroups[${i}]`, `subgroups[${i}] holds no value.`)
  const place = subgroup.findIndex((value) => !Number.isFinite(value))
  const argument = `subgroups[${i}][${Math.max(0, place)}]`
  if (place >= 0) return new StatisticsError('not-finite', argument, `${argument} must be a finite number, but is ${subgroup[place]!}.`)
  return new StatisticsError('out-of-range', `subgroups[${i}]`, `subgroups[${i}] holds a value beyond ${LARGEST_MAGNITUDE} in size.`)
}
