import { StatisticsError } from '../errors.ts'
import type { SubgroupColumns } from '../subgroups.ts'

/** The subgroups of a chart by their figures, and how many values they hold. */
export interface Samples {
  columns: SubgroupColumns
  count: number
  smallest: number
  largest: number
}

/**
 * Looks through the sizes once.
 * @param columns of at least one subgroup
 * @throws {StatisticsError} `too-few-values`
 */
export function samplesOf(columns: SubgroupColumns): Samples {
  const count = columns.n.length
  if (count === 0) throw new StatisticsError('too-few-values', 'subgroups', 'subgroups needs at least one subgroup, but has none.')
  let smallest = Infinity
  let largest = 0
  for (let point = 0; point < count; point++) {
    const n = columns.n[point]!
    if (n < smallest) smallest = n
    if (n > largest) largest = n
  }
  return { columns, count, smallest, largest }
}

/**
 * Refuses subgroups that a chart cannot take.
 * @throws {StatisticsError} `too-few-values`, `too-many-values`; the argument names the first subgroup at fault, counted from 0
 */
export function requireSizes({ columns, smallest, largest }: Samples, { min, max }: { min: number; max: number }): void {
  if (smallest >= min && largest <= max) return
  const point = columns.n.findIndex((n) => n < min || n > max)
  const argument = `subgroups[${point}]`
  const n = columns.n[point]!
  const wanted = min === max ? `${min}` : `${min} to ${max}`
  const message = `${argument} holds ${n} ${n === 1 ? 'value' : 'values'}, but this chart takes ${wanted} a subgroup.`
  throw new StatisticsError(n < min ? 'too-few-values' : 'too-many-values', argument, message)
}
