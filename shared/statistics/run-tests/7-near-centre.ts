import { inWords, inWordsFirst, plural } from './number-words.ts'
import type { RunTest } from './run-test.ts'
import { endsOfRuns, hitsOf } from './runs.ts'

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
  detect: ({ points, center, sigma }, stretch, length) => {
    // Without any spread there is no zone, and no "too quiet".
    const isWithin = (point: number): boolean => sigma[point]! > 0 && Math.abs(points[point]! - center[point]!) <= sigma[point]!
    return hitsOf(endsOfRuns(stretch, length, isWithin), length)
  },
  name: (_hit, length) => `${inWords(length)} within 1 sigma`,
  sentence: (_hit, { noun }, length) =>
    `${inWordsFirst(length)} ${plural(noun)} in a row lie within 1 sigma of the centre line: quieter than these limits allow for.`,
}
