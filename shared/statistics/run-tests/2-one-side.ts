import { inWords, inWordsFirst, plural } from './number-words.ts'
import { pointsUpTo, type Hit, type RunTest } from './run-test.ts'

/**
 * Nine points in a row on one side of the centre line; a point exactly on it is on neither side and ends the run.
 * @see L. S. Nelson, Journal of Quality Technology 16 (1984) 237–239, test 2; older practice uses seven or eight points
 */
export const oneSide: RunTest = {
  number: 2,
  title: 'Nine in a row on one side of the centre line',
  needs: 'symmetry',
  length: { usual: 9, min: 2, max: 100 },
  detect: ({ points, center }, { from, to }, length) => {
    const hits: Hit[] = []
    // How many points the run holds, counted downwards below the centre line.
    let run = 0
    for (let point = from; point < to; point++) {
      const distance = points[point]! - center[point]!
      if (distance > 0) run = run > 0 ? run + 1 : 1
      else if (distance < 0) run = run < 0 ? run - 1 : -1
      else run = 0
      if (run >= length) hits.push({ point, points: pointsUpTo(point, length), side: 'above' })
      else if (-run >= length) hits.push({ point, points: pointsUpTo(point, length), side: 'below' })
    }
    return hits
  },
  name: (_hit, length) => `${inWords(length)} on one side`,
  sentence: ({ side = 'above' }, { noun }, length) => `${inWordsFirst(length)} ${plural(noun)} in a row lie ${side} the centre line.`,
}
