import type { Baseline } from '../baseline.ts'
import { requireWhole, StatisticsError } from '../errors.ts'

/** A phase of a run as a request gives it: from this point on, until the next phase begins. */
export interface PhaseStart {
  /** Its first point, counted from 0. */
  from: number
  label: string
  /** Known centre of this phase, such as an approved one; goes before the chart's own. */
  target?: number | undefined
  /** Known sigma of single values in this phase; goes before the chart's own. */
  sigma?: number | undefined
  /** Known sigma of subgroup means in this phase, for the between/within chart. */
  sigmaOfMeans?: number | undefined
}

/** A point that is plotted and tested, but does not count for the limits. */
export interface LeftOut {
  point: number
  reason: string
}

export interface Phase extends PhaseStart, Baseline {
  leftOutWhy: LeftOut[]
}

/**
 * Cuts the points of a chart into phases. Points before the first phase named make a phase of their own, without a label.
 * @param count points of the chart
 * @param starts phases in order; none means one phase
 * @param leaveOut points that do not count for the limits, each with the reason
 * @throws {StatisticsError} `not-whole`, `out-of-range` for a place outside the chart or a phase that does not begin after the one before
 */
export function phasesOf(count: number, starts: readonly PhaseStart[], leaveOut: readonly LeftOut[]): Phase[] {
  const leftOut = markLeftOut(count, leaveOut)
  const first = starts[0]
  const all = first === undefined || first.from > 0 ? [{ from: 0, label: '' }, ...starts] : starts
  return all.map((start, i) => {
    requireWhole(`phases[${i}].from`, start.from, { min: 0, max: count - 1 })
    const to = all[i + 1]?.from ?? count
    if (to <= start.from) {
      throw new StatisticsError(
        'out-of-range',
        'phases',
        `phases must begin one after the other, but one begins at ${to} after ${start.from}.`,
      )
    }
    return { ...start, to, leftOut, leftOutWhy: leaveOut.filter(({ point }) => point >= start.from && point < to) }
  })
}

function markLeftOut(count: number, leaveOut: readonly LeftOut[]): Uint8Array | undefined {
  if (leaveOut.length === 0) return undefined
  const marks = new Uint8Array(count)
  for (const { point } of leaveOut) {
    requireWhole('leaveOut', point, { min: 0, max: count - 1 })
    marks[point] = 1
  }
  return marks
}
