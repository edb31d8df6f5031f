import { inWords, inWordsFirst, plural } from './number-words.ts'
import type { RunTest } from './run-test.ts'
import { zoneTest } from './zones.ts'

/**
 * Four of five points in a row more than 1 sigma from the centre line on one side, the last of them among the four.
 * @see L. S. Nelson, Journal of Quality Technology 16 (1984) 237–239, test 6; Western Electric, Statistical Quality Control Handbook (1956)
 */
export const fourOfFive: RunTest = {
  number: 6,
  title: 'Four of five beyond 1 sigma on one side',
  length: { usual: 4, min: 2, max: 29 },
  ...zoneTest(1),
  name: (_hit, length) => `${inWords(length)} of ${inWords(length + 1)} beyond 1 sigma`,
  sentence: ({ points, side = 'above' }, { noun }, length) =>
    `${inWordsFirst(points.length)} of the last ${inWords(length + 1)} ${plural(noun)} lie more than 1 sigma ${side} the centre line.`,
}
