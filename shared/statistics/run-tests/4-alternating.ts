import { inWords, inWordsFirst, plural } from './number-words.ts'
import type { RunTest } from './run-test.ts'
import { endsOfRuns, hitsOf } from './runs.ts'

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
    const turns = endsOfRuns({ from: from + 2, to }, length - 2, (point) =>
      isTurn(ordered[point - 2]!, ordered[point - 1]!, ordered[point]!),
    )
    return hitsOf(turns, length)
  },
  name: (_hit, length) => `${inWords(length)} alternating`,
  sentence: (_hit, { noun }, length) => `${inWordsFirst(length)} ${plural(noun)} in a row go up and down in turn.`,
}

/** Whether the middle one of three is above, or below, both its neighbours. */
function isTurn(before: number, middle: number, after: number): boolean {
  return (middle > before && middle > after) || (middle < before && middle < after)
}
