import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { passBound } from '#shared/statistics/pass-bound.ts'
import { acceptanceValueProbability, passProbability, passProbabilityFloor } from '#shared/statistics/pass-probability.ts'
import { normalDraws } from '#shared/statistics/normal-draws.ts'
import { seededRandom } from '#shared/statistics/random.ts'
import { chanceOfPassing } from '#shared/trade/standards/chance-of-passing.ts'
import { judgeUniformity } from '#shared/trade/standards/index.ts'

describe('the chance of passing <905>', () => {
  test.each([
    [100, 6],
    [96, 5],
    [104, 5],
  ])('at mean %s and SD %s it agrees with whole verdicts of the standard', (mean, sd) => {
    const draw = normalDraws(seededRandom(3))
    const units = (n: number) => Array.from({ length: n }, () => mean + sd * draw())
    const lots = 4000
    let passed = 0
    for (let lot = 0; lot < lots; lot++) {
      const ten = units(10)
      const { verdict } = judgeUniformity({ standard: 'usp-905', contents: ten })
      const isPass = verdict === 'pass' || judgeUniformity({ standard: 'usp-905', contents: [...ten, ...units(20)] }).verdict === 'pass'
      if (isPass) passed++
    }
    const { probability, standardError } = passProbability({ mean, sd })
    const error = Math.hypot(standardError, Math.sqrt((probability * (1 - probability)) / lots))
    expect(Math.abs(probability - passed / lots)).toBeLessThan(4 * error)
  })

  test('never lies below its floor, and the floor is close where the second stage hardly matters', () => {
    const contents = fc.record({ mean: fc.double({ min: 92, max: 108, noNaN: true }), sd: fc.double({ min: 1, max: 9, noNaN: true }) })
    fc.assert(
      fc.property(contents, (each) => {
        const { probability, standardError } = passProbability(each, { lots: 5000 })
        expect(passProbabilityFloor(each)).toBeLessThanOrEqual(probability + 5 * standardError)
      }),
      { numRuns: 40 },
    )
    expect(passProbabilityFloor({ mean: 100, sd: 3 })).toBeGreaterThan(0.9999)
  })

  test('a higher target widens the window of the mean', () => {
    expect(passProbability({ mean: 104, sd: 5, target: 104 }).probability).toBeGreaterThan(
      passProbability({ mean: 104, sd: 5 }).probability,
    )
  })

  test('no spread passes or fails for certain', () => {
    expect(passProbability({ mean: 100, sd: 0 }, { lots: 100 }).probability).toBe(1)
    expect(passProbability({ mean: 80, sd: 0 }, { lots: 100 }).probability).toBe(0)
  })

  test('the same seed gives the same answer', () => {
    expect(passProbability({ mean: 97, sd: 6 }, { seed: 5, lots: 2000 })).toEqual(
      passProbability({ mean: 97, sd: 6 }, { seed: 5, lots: 2000 }),
    )
  })

  test('the integral is a chance, and falls as the spread grows', () => {
    fc.assert(
      fc.property(fc.double({ min: 90, max: 110, noNaN: true }), fc.double({ min: 0.05, max: 20, noNaN: true }), (mean, sd) => {
        const chance = acceptanceValueProbability({ mean, sd }, 2)
        return chance >= 0 && chance <= 1
      }),
    )
    expect(acceptanceValueProbability({ mean: 100, sd: 7 }, 1)).toBeLessThan(acceptanceValueProbability({ mean: 100, sd: 6 }, 1))
  })

  test.each([
    [{ mean: Number.NaN, sd: 1 }, {}, 'not-finite'],
    [{ mean: 100, sd: -1 }, {}, 'out-of-range'],
    [{ mean: 100, sd: 1, target: 0 }, {}, 'not-positive'],
    [{ mean: 100, sd: 1 }, { lots: 10 }, 'out-of-range'],
    [{ mean: 100, sd: 1 }, { lots: 2_000_000 }, 'out-of-range'],
    [{ mean: 100, sd: 1 }, { seed: 0.5 }, 'not-whole'],
  ])('refuses %j %j: %s', (contents, size, code) => {
    expect(() => passProbability(contents, size)).toThrow(expect.objectContaining({ code }))
  })
})

describe('the lower bound from a sample', () => {
  const sample = { n: 30, mean: 99, sd: 4, confidence: 0.95 }

  test('is a bound: the truth lies above it about as often as the confidence says, or more', () => {
    const draw = normalDraws(seededRandom(21))
    const truth = passProbability({ mean: 99, sd: 5 }).probability
    let held = 0
    const trials = 60
    for (let trial = 0; trial < trials; trial++) {
      const contents = Array.from({ length: 30 }, () => 99 + 5 * draw())
      const mean = contents.reduce((sum, x) => sum + x, 0) / 30
      const sd = Math.sqrt(contents.reduce((sum, x) => sum + (x - mean) ** 2, 0) / 29)
      if (passBound({ n: 30, mean, sd, confidence: 0.9 }, { lots: 2000 }).probability <= truth + 0.01) held++
    }
    expect(held / trials).toBeGreaterThan(0.85)
  })

  test('rises with the number of units and falls with the confidence', () => {
    const at = (change: Partial<typeof sample>) => passBound({ ...sample, ...change }, { lots: 20_000 }).probability
    expect(at({ n: 100 })).toBeGreaterThan(at({}))
    expect(at({ confidence: 0.99 })).toBeLessThan(at({}))
  })

  test('the floor without simulation is smaller', () => {
    const { floor, probability, standardError } = passBound(sample, { lots: 20_000 })
    expect(floor).toBeLessThanOrEqual(probability + 5 * standardError)
  })

  test.each([
    [{ ...sample, n: 1 }, 'out-of-range'],
    [{ ...sample, sd: 0 }, 'not-positive'],
    [{ ...sample, confidence: 1 }, 'out-of-range'],
  ])('refuses %j: %s', (each, code) => expect(() => passBound(each)).toThrow(expect.objectContaining({ code })))
})

describe('the chance of passing the other standards', () => {
  test('Ph. Eur. 2.9.5 passes a batch of 2 % RSD and fails one of 10 %', () => {
    const { probability, standardError } = chanceOfPassing({ standard: 'ph-eur-2.9.5', mean: 400, sd: 8 })
    expect(probability).toBeGreaterThan(1 - 5 * standardError)
    expect(chanceOfPassing({ standard: 'ph-eur-2.9.5', mean: 400, sd: 40, lots: 2000 }).probability).toBeLessThan(0.05)
  })

  test('weight variation with an assay on target passes more easily than content with the same spread', () => {
    const byWeight = chanceOfPassing({ standard: 'usp-905-weight', mean: 400, sd: 26, assayPercent: 100, lots: 5000 })
    const byContent = chanceOfPassing({ standard: 'usp-905', mean: 100, sd: 6.5 })
    expect(byWeight.probability).toBeGreaterThan(byContent.probability - 4 * byWeight.standardError)
  })

  test('<2091>: scattered shells send more lots to the second step, without failing them', () => {
    const request = { standard: 'usp-2091', mean: 400, sd: 8, lots: 2000 } as const
    expect(chanceOfPassing({ ...request, shell: { mean: 96, sd: 2.5 } }).probability).toBe(1)
    expect(chanceOfPassing({ ...request, shell: { mean: 96, sd: 20 } }).probability).toBe(1)
    expect(chanceOfPassing({ ...request, sd: 50, shell: { mean: 96, sd: 2.5 } }).probability).toBeLessThan(0.2)
  })

  test('refuses a negative spread', () => {
    expect(() => chanceOfPassing({ standard: 'ph-eur-2.9.5', mean: 400, sd: -1 })).toThrow(
      expect.objectContaining({ code: 'out-of-range' }),
    )
  })
})
