import { inWords, inWordsFirst, plural } from './number-words.ts'
import { pointsUpTo, type Hit, type RunTest } from './run-test.ts'

/**
 * Fifteen points in a row within 1 sigma of the centre line, on either side; a point exactly on 1 sigma is within.
 * Limits that are too wide, a mixture inside the subgroups or doctored figures look like this.
 * @see L. S. Nelson, Journal of Quality Technology 16 (1984) 237–239, test 7
 */
export const nearCentre: RunTest = {
  number: 7,
  title: 'Fifteen in a row within 1 sigma of the centre line',
  needs: 'normality',
  length: { usual: 15, min: 2, max: 100 },
  detect: ({ points, center, sigma }, { from, to }, length) => {
    const hits: Hit[] = []
    let run = 0
    for (let point = from; point < to; point++) {
      const value = points[point]!
      const zone = sigma[point]!
      // Without any spread there is no zone, and no "too quiet".
      const isWithin = zone > 0 && value <= center[point]! + zone && value >= center[point]! - zone
      run = isWithin ? run + 1 : 0
      if (run >= length) hits.push({ point, points: pointsUpTo(point, length) })
    }
    return hits
  },
  name: (_hit, length) => `${inWords(length)} within 1 sigma`,
  sentence: (_hit, { noun }, length) =>
    `${inWordsFirst(length)} ${plural(noun)} in a row lie within 1 sigma of the centre line: quieter than these limits allow for.`,
}
