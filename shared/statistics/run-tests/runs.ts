import type { Stretch } from '../baseline.ts'
import { pointsUpTo, type Hit, type Side } from './run-test.ts'

/**
 * The points at which `length` points in a row have all held something.
 *
 * Looks at each window from its far end: where a point breaks it, no window can be whole before one that begins just after
 * that point, so in a calm process most points are never looked at and none is looked at twice.
 * @param stretch no window begins before it
 * @param length points in a row
 * @param holds what each of them must do
 * @returns the last point of every whole window, in order
 */
export function endsOfRuns({ from, to }: Stretch, length: number, holds: (point: number) => boolean): number[] {
  const ends: number[] = []
  let end = from + length - 1
  // Points of the window before this one are known to hold.
  let unseen = from
  while (end < to) {
    let place = end
    while (place >= unseen && holds(place)) place--
    const isWhole = place < unseen
    if (isWhole) ends.push(end)
    unseen = end + 1
    end = isWhole ? end + 1 : place + length
  }
  return ends
}

/** A hit at every one of `ends`, made up of the last `length` points. */
export function hitsOf(ends: readonly number[], length: number, side?: Side): Hit[] {
  return ends.map((point) => ({ point, points: pointsUpTo(point, length), ...(side && { side }) }))
}
