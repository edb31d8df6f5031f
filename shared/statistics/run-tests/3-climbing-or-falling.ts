import { inWords, inWordsFirst, plural } from './number-words.ts'
import { pointsUpTo, type Hit, type RunTest } from './run-test.ts'

/**
 * Six points in a row, each higher (or each lower) than the one before: five steps. Equal neighbours end the run.
 * @see L. S. Nelson, Journal of Quality Technology 16 (1984) 237–239, test 3
 */
export const climbingOrFalling: RunTest = {
  number: 3,
  title: 'Six in a row climbing or falling',
  needs: 'independence',
  length: { usual: 6, min: 3, max: 100 },
  detect: ({ ordered }, { from, to }, length) => {
    const hits: Hit[] = []
    // Steps in one direction so far, counted downwards when falling.
    let steps = 0
    for (let point = from + 1; point < to; point++) {
      const step = ordered[point]! - ordered[point - 1]!
      if (step > 0) steps = steps > 0 ? steps + 1 : 1
      else if (step < 0) steps = steps < 0 ? steps - 1 : -1
      else steps = 0
      if (steps >= length - 1) hits.push({ point, points: pointsUpTo(point, length), side: 'above' })
      else if (-steps >= length - 1) hits.push({ point, points: pointsUpTo(point, length), side: 'below' })
    }
    return hits
  },
  name: ({ side }, length) => `${inWords(length)} ${side === 'above' ? 'climbing' : 'falling'}`,
  sentence: ({ side }, { noun }, length) =>
    `${inWordsFirst(length)} ${plural(noun)} in a row, each ${side === 'above' ? 'higher' : 'lower'} than the one before.`,
}
