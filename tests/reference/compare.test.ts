import { expect, test } from 'vitest'
import { differences, expectCase } from './compare.ts'

const absolute = { absolute: 0.01 }

test.each<[string, unknown, unknown, number]>([
  ['a number inside the tolerance', { sd: 1.009 }, { sd: 1 }, 0],
  ['a number outside it', { sd: 1.011 }, { sd: 1 }, 1],
  ['no number at all', { sd: null }, { sd: 1 }, 1],
  ['NaN', { sd: NaN }, { sd: 1 }, 1],
  ['a missing field', {}, { sd: 1 }, 1],
  ['a missing object', {}, { location: { center: 1 } }, 1],
  ['a wrong word', { verdict: 'pass' }, { verdict: 'fail' }, 1],
  ['a list of another length', { lower: [1, 2] }, { lower: [1, 2, 3] }, 1],
  ['a list with one wrong element', { lower: [1, 2, 3] }, { lower: [1, 2.5, 3] }, 1],
  ['a place that is not compared', { lower: [1, 99, 3] }, { lower: [1, null, 3] }, 0],
  ['one number for a list that never changes', { center: [5, 5] }, { center: 5 }, 0],
  ['one number for a list that does', { center: [5, 6] }, { center: 5 }, 1],
  ['more than was asked for', { sd: 1, more: 'words' }, { sd: 1 }, 0],
  [
    'signals in another order',
    {
      signals: [
        { point: 2, test: 1 },
        { point: 1, test: 5 },
      ],
    },
    {
      signals: [
        { point: 1, test: 5 },
        { point: 2, test: 1 },
      ],
    },
    0,
  ],
  ['one signal twice for two', { signals: [{ point: 1 }, { point: 1 }] }, { signals: [{ point: 1 }, { point: 2 }] }, 1],
  ['a signal too many', { signals: [{ point: 1 }] }, { signals: [] }, 1],
])('%s', (_name, got, want, wrong) => {
  expect(differences(got, want, absolute, '')).toHaveLength(wrong)
})

test('a relative tolerance keeps zeros sane', () => {
  const relative = { relative: 1e-3 }
  expect(differences(100.09, 100, relative, 'x')).toEqual([])
  expect(differences(100.11, 100, relative, 'x')).toHaveLength(1)
  expect(differences(1e-13, 0, relative, 'x')).toEqual([])
  expect(differences(1e-11, 0, relative, 'x')).toHaveLength(1)
})

test('a case that fails says which, where, what and why', () => {
  const referenceCase = { id: 'a-case', expected: { sd: 1 }, tolerance: absolute, note: 'printed to two places' }
  expect(() => expectCase({ sd: 2 }, referenceCase)).toThrow(/a-case.*printed to two places[^]*sd: want 1 ± 0.01, got 2/)
})
