import { expect, test } from 'vitest'
import { passBound } from '#shared/statistics/pass-bound.ts'
import { acceptanceValueProbability, passProbability } from '#shared/statistics/pass-probability.ts'
import { expectCase, loadCases, type ReferenceCase } from './compare.ts'

test.each(loadCases('pass-probability'))('$id', (referenceCase) => {
  expectCase(passProbability(referenceCase.body), referenceCase)
})

// The notes carry the first stage by SciPy's numerical integration, with the acceptance value unrounded.
test.each(loadCases('pass-probability'))('$id, first stage by integration', ({ body, note = '' }) => {
  const integrated = Number(/(0\.\d+) by numerical integration/.exec(note)?.[1])
  expect(acceptanceValueProbability(body, 1, 15)).toBeCloseTo(integrated, 6)
})

interface BoundCase extends Pick<ReferenceCase, 'id' | 'expected' | 'tolerance'> {
  input: { n: number; mean: number; sd: number; confidence: number }
}

test.each(loadCases<BoundCase>('pass-bound'))('$id', (referenceCase) => {
  const bound = passBound(referenceCase.input)
  expectCase(bound, referenceCase)
  const region = referenceCase.expected as { sigmaUpper: number; meanInterval: [number, number] }
  expect(bound.sigmaUpper).toBeCloseTo(region.sigmaUpper, 8)
  expect(bound.meanInterval[0]).toBeCloseTo(region.meanInterval[0], 8)
  expect(bound.meanInterval[1]).toBeCloseTo(region.meanInterval[1], 8)
})
