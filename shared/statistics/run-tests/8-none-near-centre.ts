import { inWords, inWordsFirst, plural } from './number-words.ts'
import type { RunTest } from './run-test.ts'
import { endsOfRuns, hitsOf } from './runs.ts'

/**
 * Eight points in a row more than 1 sigma from the centre line, some above it and some below; exactly on 1 sigma is within.
 * Two streams in turn, such as two ejection lanes or balances, look like this.
 * @see L. S. Nelson, Journal of Quality Technology 16 (1984) 237–239, test 8
 */
export const noneNearCentre: RunTest = {
  number: 8,
  title: 'Eight in a row beyond 1 sigma on both sides',
  needs: 'normality',
  length: { usual: 8, min: 2, max: 100 },
  detect: ({ points, center, sigma }, stretch, length) => {
    const isAbove = (point: number): boolean => points[point]! > center[point]! + sigma[point]!
    const isBelow = (point: number): boolean => points[point]! < center[point]! - sigma[point]!
    const outside = hitsOf(
      endsOfRuns(stretch, length, (point) => isAbove(point) || isBelow(point)),
      length,
    )
    return outside.filter((hit) => hit.points.some(isAbove) && hit.points.some(isBelow))
  },
  name: (_hit, length) => `${inWords(length)} beyond 1 sigma, both sides`,
  sentence: (_hit, { noun }, length) =>
    `${inWordsFirst(length)} ${plural(noun)} in a row lie more than 1 sigma from the centre line, on both sides of it.`,
}
