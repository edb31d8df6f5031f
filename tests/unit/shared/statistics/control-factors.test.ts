import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { c4, controlFactors, d2, d3 } from '#shared/statistics/control-factors.ts'

const sizes = fc.integer({ min: 2, max: 999 })

describe.each([
  ['c4', c4],
  ['d2', d2],
  ['d3', d3],
  ['controlFactors', controlFactors],
])('%s', (_name, factor) => {
  test.each([
    [1, 'out-of-range'],
    [1001, 'out-of-range'],
    [0, 'out-of-range'],
    [4.5, 'not-whole'],
    [NaN, 'not-whole'],
    [Infinity, 'not-whole'],
  ])('refuses n = %s', (n, code) => {
    expect(() => factor(n)).toThrow(expect.objectContaining({ code, argument: 'n' }))
  })
})

test.each([
  ['d2(2) = 2/√π', d2(2), 2 / Math.sqrt(Math.PI)],
  ['d2(3) = 3/√π', d2(3), 3 / Math.sqrt(Math.PI)],
  ['d2(4) = 12 · arctan(√2) / π^1.5', d2(4), (12 / Math.sqrt(Math.PI)) * (Math.atan(Math.SQRT2) / Math.PI)],
  ['d3(2) = √(2 − 4/π)', d3(2), Math.sqrt(2 - 4 / Math.PI)],
  ['c4(2) = √(2/π)', c4(2), Math.sqrt(2 / Math.PI)],
  ['c4(3) = √π/2', c4(3), Math.sqrt(Math.PI) / 2],
  ['c4(4) = 2√(2/(3π))', c4(4), 2 * Math.sqrt(2 / (3 * Math.PI))],
])('%s', (_name, got, closedForm) => {
  expect(Math.abs(got - closedForm)).toBeLessThan(1e-13)
})

/** Φ by a Taylor-like series, another way than the program's. */
function phi(z: number): number {
  let term = z
  let sum = z
  for (let k = 1; k < 400 && Math.abs(term) > 1e-20; k++) {
    term *= (z * z) / (2 * k + 1)
    sum += term
  }
  return 0.5 + (sum * Math.exp((-z * z) / 2)) / Math.sqrt(2 * Math.PI)
}

test('d2 agrees with the integral of 1 − Φⁿ − (1 − Φ)ⁿ, another formula', () => {
  for (const n of [2, 3, 5, 10, 36, 100, 500]) {
    let sum = 0
    for (let x = -8; x <= 8; x += 1 / 32) sum += (1 - phi(x) ** n - (1 - phi(x)) ** n) / 32
    expect(d2(n)).toBeCloseTo(sum, 10)
  }
})

test('d3 and c4 agree with simulated normal subgroups of 5', () => {
  const random = seededNormal(20_417)
  let ranges = 0
  let squares = 0
  let sds = 0
  const rounds = 200_000
  for (let round = 0; round < rounds; round++) {
    const values = [random(), random(), random(), random(), random()]
    const range = Math.max(...values) - Math.min(...values)
    const mean = values.reduce((sum, value) => sum + value, 0) / 5
    ranges += range
    squares += range * range
    sds += Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / 4)
  }
  const mean = ranges / rounds
  expect(Math.sqrt(squares / rounds - mean ** 2)).toBeCloseTo(d3(5), 2)
  expect(mean).toBeCloseTo(d2(5), 2)
  expect(sds / rounds).toBeCloseTo(c4(5), 2)
})

test('c4 and d2 rise with n, d3 falls from n = 4 on, c4 stays below 1', () => {
  fc.assert(
    fc.property(sizes, (n) => c4(n) < c4(n + 1) && c4(n + 1) < 1 && d2(n) < d2(n + 1) && (n < 4 || d3(n) > d3(n + 1))),
    { numRuns: 40 },
  )
})

test('lower and upper factors stand evenly about their centre unless the lower one is cut off at zero', () => {
  fc.assert(
    fc.property(sizes, (n) => {
      const { D3, D4, B3, B4, B5, B6, c4: center } = controlFactors(n)
      for (const [low, high, middle] of [
        [D3, D4, 1],
        [B3, B4, 1],
        [B5, B6, center],
      ] as const) {
        expect(low).toBeGreaterThanOrEqual(0)
        if (low > 0) expect(low + high).toBeCloseTo(2 * middle, 12)
        else expect(high).toBeGreaterThanOrEqual(2 * middle)
      }
    }),
    { numRuns: 40 },
  )
})

function seededNormal(seed: number): () => number {
  let state = seed
  const uniform = (): number => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0
    return (state + 0.5) / 2 ** 32
  }
  return () => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform())
}
