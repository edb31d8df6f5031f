import { expect, test } from 'vitest'
import { controlFactors } from '#shared/statistics/control-factors.ts'
import { expectCase, loadCases, type ReferenceCase } from './compare.ts'

const FACTORS = ['d2', 'd3', 'c4', 'A2', 'A3', 'D3', 'D4', 'B3', 'B4', 'B5', 'B6', 'E2'] as const

type FactorRow = Pick<ReferenceCase, 'id' | 'tolerance' | 'note'> & { n: number } & Partial<Record<(typeof FACTORS)[number], number>>

// These rows have no endpoint: the factors stand beside the id instead of in `expected`.
test.each(loadCases<FactorRow>('control-factors'))('$id', (row) => {
  const expected = Object.fromEntries(FACTORS.filter((factor) => factor in row).map((factor) => [factor, row[factor]]))
  expect(Object.keys(expected).length).toBeGreaterThan(1)
  expectCase(controlFactors(row.n), { ...row, expected })
})

test('the factors computed elsewhere to twelve decimals agree in ten', () => {
  const rows = loadCases<FactorRow>('control-factors').filter(({ id }) => id.startsWith('factors-computed'))
  expect(rows.length).toBeGreaterThan(40)
  for (const row of rows) {
    const got = controlFactors(row.n)
    for (const factor of FACTORS) expect(Math.abs(got[factor] - (row[factor] ?? NaN)), `${factor} at ${row.n}`).toBeLessThan(1e-10)
  }
})
