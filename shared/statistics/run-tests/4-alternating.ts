import { inWords, inWordsFirst, plural } from './number-words.ts'
import { pointsUpTo, type Hit, type RunTest } from './run-test.ts'

/**
 * Fourteen points in a row going up and down in turn: thirteen steps, each against the one before. Equal neighbours end the run.
 * @see L. S. Nelson, Journal of Quality Technology 16 (1984) 237–239, test 4
 */
export const alternating: RunTest = {
  number: 4,
  title: 'Fourteen in a row alternating up and down',
  needs: 'independence',
  length: { usual: 14, min: 3, max: 100 },
  detect: ({ ordered }, { from, to }, length) => {
    const hits: Hit[] = []
    let steps = 0
    let before = 0
    for (let point = from + 1; point < to; point++) {
      const step = ordered[point]! - ordered[point - 1]!
      const direction = step > 0 ? 1 : step < 0 ? -1 : 0
      if (direction === 0) steps = 0
      else steps = direction === -before ? steps + 1 : 1
      before = direction
      if (steps >= length - 1) hits.push({ point, points: pointsUpTo(point, length) })
    }
    return hits
  },
  name: (_hit, length) => `${inWords(length)} alternating`,
  sentence: (_hit, { noun }, length) => `${inWordsFirst(length)} ${plural(noun)} in a row go up and down in turn.`,
}
