import { expect, test } from 'vitest'
import { averageRunLength } from '#shared/statistics/run-length.ts'
import { expectCase, loadCases } from './compare.ts'

test.each(loadCases('run-length'))('$id', (referenceCase) => {
  const answer = averageRunLength(referenceCase.body)
  expectCase(answer, referenceCase)
  expect(answer.method).toBe('exact')
})
