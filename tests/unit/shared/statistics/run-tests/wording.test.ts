import { expect, test } from 'vitest'
import { controlChart } from '#shared/statistics/control-chart.ts'
import { inWords, plural } from '#shared/statistics/run-tests/number-words.ts'

const up = (n: number) => Array.from({ length: n }, (_, i) => 351 + i / 4)
const inTurn = Array.from({ length: 14 }, (_, i) => (i % 2 === 0 ? 351 : 349))
const twoStreams = Array.from({ length: 8 }, (_, i) => (i % 2 === 0 ? 355 : 345))

test.each<[number, number[], string, string]>([
  [1, [350, 363], 'outside', 'This value lies above its upper limit: 363.0 against 362.0.'],
  [1, [350, 337], 'outside', 'This value lies below its lower limit: 337.0 against 338.0.'],
  [2, Array.from({ length: 9 }, () => 351), 'nine on one side', 'Nine values in a row lie above the centre line.'],
  [2, Array.from({ length: 9 }, () => 349), 'nine on one side', 'Nine values in a row lie below the centre line.'],
  [3, up(6), 'six climbing', 'Six values in a row, each higher than the one before.'],
  [3, up(6).toReversed(), 'six falling', 'Six values in a row, each lower than the one before.'],
  [4, inTurn, 'fourteen alternating', 'Fourteen values in a row go up and down in turn.'],
  [5, [359, 350, 360], 'two of three beyond 2 sigma', 'Two of the last three values lie more than 2 sigma above the centre line.'],
  [
    6,
    [345, 345, 350, 345, 344],
    'four of five beyond 1 sigma',
    'Four of the last five values lie more than 1 sigma below the centre line.',
  ],
  [
    7,
    Array.from({ length: 15 }, () => 350),
    'fifteen within 1 sigma',
    'Fifteen values in a row lie within 1 sigma of the centre line: quieter than these limits allow for.',
  ],
  [
    8,
    twoStreams,
    'eight beyond 1 sigma, both sides',
    'Eight values in a row lie more than 1 sigma from the centre line, on both sides of it.',
  ],
])('test %i of %j is called "%s"', (number, values, name, sentence) => {
  const subgroups = values.map((value) => [value])
  const { signals } = controlChart({ chart: 'individuals', subgroups, target: 350, sigma: 4, tests: [number] })
  expect(signals.filter(({ panel }) => panel === 'location')).toEqual([expect.objectContaining({ name, sentence })])
})

test('the points of two of three are only those beyond', () => {
  const subgroups = [359, 350, 360].map((value) => [value])
  const { signals } = controlChart({ chart: 'individuals', subgroups, target: 350, sigma: 4, tests: [5] })
  expect(signals[0]?.points).toEqual([0, 2])
})

test('a count is a word up to twenty and digits above', () => {
  expect([2, 14, 20, 21].map(inWords)).toEqual(['two', 'fourteen', 'twenty', '21'])
})

test('a noun with "of" takes its plural at the head', () => {
  expect(['mean', 'standard deviation', 'moving range of means'].map(plural)).toEqual([
    'means',
    'standard deviations',
    'moving ranges of means',
  ])
})
