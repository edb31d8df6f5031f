import { inWords, inWordsFirst, plural } from './number-words.ts'
import type { RunTest } from './run-test.ts'
import { endsOfRuns, hitsOf } from './runs.ts'

/**
 * Nine points in a row on one side of the centre line; a point exactly on it is on neither side and ends the run.
 * @see L. S. Nelson, Journal of Quality Technology 16 (1984) 237–239, test 2; older practice uses seven or eight points
 */
export const oneSide: RunTest = {
  number: 2,
  title: 'Nine in a row on one side of the centre line',
  needs: 'symmetry',
  length: { usual: 9, min: 2, max: 100 },
  detect: ({ points, center }, stretch, length) => {
    const above = endsOfRuns(stretch, length, (point) => points[point]! > center[point]!)
    const below = endsOfRuns(stretch, length, (point) => points[point]! < center[point]!)
    return [...hitsOf(above, length, 'above'), ...hitsOf(below, length, 'below')]
  },
  name: (_hit, length) => `${inWords(length)} on one side`,
  sentence: ({ side = 'above' }, { noun }, length) => `${inWordsFirst(length)} ${plural(noun)} in a row lie ${side} the centre line.`,
}
