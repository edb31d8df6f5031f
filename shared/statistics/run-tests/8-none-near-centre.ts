import { inWords, inWordsFirst, plural } from './number-words.ts'
import { pointsUpTo, type Hit, type RunTest } from './run-test.ts'

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
  detect: ({ points, center, sigma }, { from, to }, length) => {
    const hits: Hit[] = []
    let run = 0
    let lastAbove = -Infinity
    let lastBelow = -Infinity
    for (let point = from; point < to; point++) {
      const isAbove = points[point]! > center[point]! + sigma[point]!
      const isBelow = points[point]! < center[point]! - sigma[point]!
      run = isAbove || isBelow ? run + 1 : 0
      if (isAbove) lastAbove = point
      if (isBelow) lastBelow = point
      if (run >= length && Math.min(lastAbove, lastBelow) > point - length) hits.push({ point, points: pointsUpTo(point, length) })
    }
    return hits
  },
  name: (_hit, length) => `${inWords(length)} beyond 1 sigma, both sides`,
  sentence: (_hit, { noun }, length) =>
    `${inWordsFirst(length)} ${plural(noun)} in a row lie more than 1 sigma from the centre line, on both sides of it.`,
}
