import { expect, test } from 'vitest'
import { parseFigure, parseWeights } from '@/format/parse-figure.ts'

test.each([
  ['12', 12],
  [' 96.10 ', 96.1],
  ['96,1', 96.1],
  ['.5', 0.5],
  ['−3', -3],
  ['5.', 5],
])('“%s” is %d', (text, figure) => {
  expect(parseFigure(text)).toBe(figure)
})

test.each(['', '1.2.3', '1,000.5', '1e5', '0x10', 'NaN', '12 mg', '=1+1', 'Infinity'])('“%s” is no number', (text) => {
  expect(parseFigure(text)).toBeUndefined()
})

test('a pasted column is read line by line, with points or commas, and what is no number is named', () => {
  expect(parseWeights('96.1\r\n95,8\t97; 94\n\nabc 9x')).toEqual({ weightsMg: [96.1, 95.8, 97, 94], unread: ['abc', '9x'] })
  expect(parseWeights('96.1, 95.8, 97')).toEqual({ weightsMg: [96.1, 95.8, 97], unread: [] })
})
