import { expect, test } from 'vitest'
import { limitBand, limitsBeyondSpecification } from '#shared/trade/plan-limits.ts'

const product = { targetFillMg: 400, lowerSpecificationMg: 370, upperSpecificationMg: 440 }
const plan = { meanAlertPercent: 3, meanActionPercent: 5, individualAlertPercent: 7, individualActionPercent: 7.5 }

test('a limit in percent is a band of weights about the target', () => {
  expect(limitBand(400, 7.5)).toEqual({ lowerMg: 370, upperMg: 430 })
})

test('limits at the specification fit it', () => {
  expect(limitsBeyondSpecification(product, plan)).toEqual([])
})

test.each([
  [{ individualActionPercent: 7.501 }, ['individualActionPercent']],
  [{ meanActionPercent: 8 }, ['meanActionPercent']],
  [{ meanActionPercent: 20, individualActionPercent: 20 }, ['meanActionPercent', 'individualActionPercent']],
])('%j is wider than the specification', (fields, expected) => {
  expect(limitsBeyondSpecification(product, { ...plan, ...fields })).toEqual(expected)
})

test('the upper side is looked at too', () => {
  expect(limitsBeyondSpecification({ ...product, lowerSpecificationMg: 300, upperSpecificationMg: 420 }, plan)).toEqual([
    'individualActionPercent',
  ])
})
