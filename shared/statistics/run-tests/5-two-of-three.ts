import { inWords, inWordsFirst, plural } from './number-words.ts'
import type { RunTest } from './run-test.ts'
import { zoneTest } from './zones.ts'

/**
 * Two of three points in a row more than 2 sigma from the centre line on one side, the last of them among the two.
 * @see L. S. Nelson, Journal of Quality Technology 16 (1984) 237–239, test 5; Western Electric, Statistical Quality Control Handbook (1956)
 */
export const twoOfThree: RunTest = {
  number: 5,
  title: 'Two of three beyond 2 sigma on one side',
  length: { usual: 2, min: 2, max: 29 },
  ...zoneTest(2),
  name: (_hit, length) => `${inWords(length)} of ${inWords(length + 1)} beyond 2 sigma`,
  sentence: ({ points, side = 'above' }, { noun }, length) =>
    `${inWordsFirst(points.length)} of the last ${inWords(length + 1)} ${plural(noun)} lie more than 2 sigma ${side} the centre line.`,
}
