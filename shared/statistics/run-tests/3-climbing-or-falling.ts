import { inWords, inWordsFirst, plural } from './number-words.ts'
import type { RunTest } from './run-test.ts'
import { endsOfRuns, hitsOf } from './runs.ts'

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
    const steps = { from: from + 1, to }
    const climbing = endsOfRuns(steps, length - 1, (point) => ordered[point]! > ordered[point - 1]!)
    const falling = endsOfRuns(steps, length - 1, (point) => ordered[point]! < ordered[point - 1]!)
    return [...hitsOf(climbing, length, 'above'), ...hitsOf(falling, length, 'below')]
  },
  name: ({ side }, length) => `${inWords(length)} ${side === 'above' ? 'climbing' : 'falling'}`,
  sentence: ({ side }, { noun }, length) =>
    `${inWordsFirst(length)} ${plural(noun)} in a row, each ${side === 'above' ? 'higher' : 'lower'} than the one before.`,
}
