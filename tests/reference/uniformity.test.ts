import { expect, test } from 'vitest'
import { judgeUniformity } from '#shared/trade/standards/index.ts'
import { expectCase, loadCases } from './compare.ts'

test.each([...loadCases('uniformity'), ...loadCases('acceptance-edges')])('$id', (referenceCase) => {
  expectCase(judgeUniformity(referenceCase.body), referenceCase)
})

test('where <2091> is undecided the verdict is neither pass nor fail', () => {
  const undecided = [...loadCases('uniformity'), ...loadCases('acceptance-edges')].filter(({ expected, body }) => {
    const { standard }: { standard: string } = body
    return standard === 'usp-2091' && !Object.hasOwn(expected as object, 'verdict')
  })
  expect(undecided.length).toBeGreaterThan(1)
  for (const { id, body } of undecided) expect(['weigh-shells', 'test-40-more'], id).toContain(judgeUniformity(body).verdict)
})
