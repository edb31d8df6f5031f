import { expect, test } from 'vitest'
import { summarise } from '#shared/statistics/summary.ts'
import { expectCase, loadCases } from './compare.ts'

interface SummaryBody {
  values: number[]
}

test.each(loadCases('summary'))('$id', (referenceCase) => {
  const { values }: SummaryBody = referenceCase.body
  expectCase(summarise(values), referenceCase)
})

test('the certified mean and SD of the lower-difficulty sets hold to 13 digits', () => {
  for (const { id, body, expected } of loadCases('summary').filter(({ id }) => /lew|numacc1/.test(id))) {
    const { values }: SummaryBody = body
    const { mean, sd } = summarise(values)
    const want = expected as { mean: number; sd: number }
    expect(Math.abs(mean / want.mean - 1), id).toBeLessThan(1e-13)
    expect(Math.abs(sd / want.sd - 1), id).toBeLessThan(1e-13)
  }
})
