import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { acceptanceValue, referenceValue, roundAcceptanceValue } from '#shared/statistics/acceptance-value.ts'
import { judgeUniformity, STANDARDS } from '#shared/trade/standards/index.ts'
import { judgeEligibility } from '#shared/trade/standards/usp-905-weight.ts'

const content = fc.double({ min: 60, max: 140, noNaN: true })
const tens = fc.array(content, { minLength: 10, maxLength: 10 })
const thirties = fc.array(content, { minLength: 30, maxLength: 30 })

/** The rule once more, in the words of the table: an independent way to the same figure. */
function byTheTable(contents: number[], target: number): number {
  const n = contents.length
  const mean = contents.reduce((sum, x) => sum + x, 0) / n
  const s = Math.sqrt(contents.reduce((sum, x) => sum + (x - mean) ** 2, 0) / (n - 1))
  const k = n === 10 ? 2.4 : 2
  const high = target <= 101.5 ? 101.5 : target
  if (mean < 98.5) return 98.5 - mean + k * s
  if (mean > high) return mean - high + k * s
  return k * s
}

describe('usp-905', () => {
  test('agrees with the table worked out branch by branch', () => {
    fc.assert(
      fc.property(fc.oneof(tens, thirties), fc.double({ min: 95, max: 110, noNaN: true }), (contents, target) => {
        const { acceptanceValue: got } = judgeUniformity({ standard: 'usp-905', contents, target })
        expect(got).toBeCloseTo(byTheTable(contents, target), 9)
      }),
    )
  })

  test('ten units never fail and thirty never ask for more', () => {
    fc.assert(fc.property(tens, (contents) => judgeUniformity({ standard: 'usp-905', contents }).verdict !== 'fail'))
    fc.assert(fc.property(thirties, (contents) => judgeUniformity({ standard: 'usp-905', contents }).verdict !== 'test-20-more'))
  })

  test('does not depend on the order of the units', () => {
    fc.assert(
      fc.property(tens, (contents) => {
        const there = judgeUniformity({ standard: 'usp-905', contents })
        const back = judgeUniformity({ standard: 'usp-905', contents: contents.toReversed() })
        expect(back.acceptanceValue).toBeCloseTo(there.acceptanceValue, 10)
      }),
    )
  })

  test('a unit of several actives is judged by the worst, and shows each', () => {
    const good = [99, 101, 100, 99, 101, 100, 99, 101, 100, 100]
    const poor = [80, 120, 100, 85, 115, 100, 90, 110, 100, 100]
    const answer = judgeUniformity({
      standard: 'usp-905',
      actives: [
        { active: 'first', contents: good },
        { active: 'second', contents: poor },
      ],
    })
    expect(answer.verdict).toBe('test-20-more')
    expect(answer.actives?.map(({ verdict }) => verdict)).toEqual(['pass', 'test-20-more'])
    expect(answer.reasons).toContain('The verdict is that of second.')
    expect(answer.acceptanceValue).toBeCloseTo(byTheTable(poor, 100), 9)
  })

  test.each([
    [[], 'too-few-values', 'contents'],
    [new Array<number>(9).fill(100), 'too-few-values', 'contents'],
    [new Array<number>(20).fill(100), 'too-few-values', 'contents'],
    [new Array<number>(31).fill(100), 'too-many-values', 'contents'],
    [[...new Array<number>(9).fill(100), Number.NaN], 'not-finite', 'contents[9]'],
  ])('refuses %j', (contents, code, argument) => {
    expect(() => judgeUniformity({ standard: 'usp-905', contents })).toThrow(expect.objectContaining({ code, argument }))
  })

  test('refuses a target that is none, and a request without contents', () => {
    const contents = new Array<number>(10).fill(100)
    expect(() => judgeUniformity({ standard: 'usp-905', contents, target: 0 })).toThrow(expect.objectContaining({ code: 'not-positive' }))
    expect(() => judgeUniformity({ standard: 'usp-905' })).toThrow(expect.objectContaining({ argument: 'contents' }))
    expect(() => judgeUniformity({ standard: 'usp-905', actives: [] })).toThrow(expect.objectContaining({ argument: 'actives' }))
  })

  test.each([
    [15.04, 15],
    [15.05, 15.1],
    [15.049999, 15],
    [14.95, 15],
    [0, 0],
  ])('rounds %s to %s, a five upwards', (value, rounded) => expect(roundAcceptanceValue(value)).toBe(rounded))

  test('the reference value stays inside its window and costs nothing there', () => {
    fc.assert(
      fc.property(content, fc.double({ min: 95, max: 110, noNaN: true }), (mean, target) => {
        const m = referenceValue(mean, target)
        return m >= 98.5 && m <= Math.max(101.5, target) && acceptanceValue({ mean, sd: 0, k: 2.4 }, target) === Math.abs(m - mean)
      }),
    )
  })

  test('the arithmetic can be followed: its last line carries the rounded value and the limit', () => {
    const contents = [96.1, 97.4, 95.2, 98.8, 94.9, 97, 96.3, 98.1, 95.7, 96.5]
    expect(judgeUniformity({ standard: 'usp-905', contents }).arithmetic).toEqual([
      'T = 100, so the window of the mean is 98.5 to 101.5',
      'X̄ = 966 / 10 = 96.6',
      's = √(Σ(x − X̄)² / (n − 1)) = √(13.9 / 9) = 1.2428',
      'X̄ < 98.5, so M = 98.5',
      'AV = |M − X̄| + k·s = |98.5 − 96.6| + 2.4 × 1.2428 = 4.8826',
      'AV to one decimal: 4.9 ≤ L1 = 15.0',
    ])
  })
})

describe('usp-905-weight', () => {
  const weights = [352.1, 347.8, 355, 349.2, 351.7, 346.9, 353.3, 350.4, 348.6, 351]

  test('the mean content is the assay, whatever the weights', () => {
    const mg = fc.double({ min: 10, max: 1000, noNaN: true })
    fc.assert(
      fc.property(fc.array(mg, { minLength: 10, maxLength: 10 }), fc.double({ min: 90, max: 110, noNaN: true }), (each, assayPercent) => {
        expect(judgeUniformity({ standard: 'usp-905-weight', weights: each, assayPercent }).mean).toBeCloseTo(assayPercent, 8)
      }),
    )
  })

  test('weighed in kilograms or milligrams, the verdict is the same', () => {
    const mg = judgeUniformity({ standard: 'usp-905-weight', weights, assayPercent: 97 })
    const kg = judgeUniformity({ standard: 'usp-905-weight', weights: weights.map((w) => w / 1e6), assayPercent: 97 })
    expect(kg.acceptanceValue).toBeCloseTo(mg.acceptanceValue, 9)
  })

  test.each([
    ['net-individual', 'compendial'],
    ['net-mean-tare', 'indicative'],
    ['gross', 'indicative'],
  ] as const)('weights that are %s support a claim that is %s', (weighingBasis, basis) => {
    expect(judgeUniformity({ standard: 'usp-905-weight', weights, assayPercent: 99, weighingBasis }).basis).toBe(basis)
  })

  test.each([
    [25, 100, true],
    [24.9, 50, false],
    [30, 121, false],
    [30, 120, true],
  ])('%s mg of active in %s mg of fill: eligible %s', (claimMg, fillMg, isEligible) => {
    expect(judgeEligibility(claimMg, fillMg).isEligible).toBe(isEligible)
  })

  test('an active below 25 % makes the verdict indicative', () => {
    const answer = judgeUniformity({ standard: 'usp-905-weight', weights, assayPercent: 99, claimMg: 50 })
    expect(answer).toMatchObject({ basis: 'indicative', eligibility: { isEligible: false } })
  })

  test('two actives take their own assay', () => {
    const actives = [
      { active: 'first', assayPercent: 100, claimMg: 200 },
      { active: 'second', assayPercent: 90, claimMg: 100 },
    ]
    const answer = judgeUniformity({ standard: 'usp-905-weight', weights, actives })
    expect(answer.actives?.map(({ mean }) => Math.round(mean))).toEqual([100, 90])
    expect(answer.referenceValue).toBe(98.5)
  })

  test('refuses a weight of zero and a missing assay', () => {
    const withZero = [0, ...weights.slice(1)]
    expect(() => judgeUniformity({ standard: 'usp-905-weight', weights: withZero, assayPercent: 99 })).toThrow(
      expect.objectContaining({ code: 'not-positive', argument: 'weights' }),
    )
    expect(() => judgeUniformity({ standard: 'usp-905-weight', weights })).toThrow(expect.objectContaining({ argument: 'assayPercent' }))
  })
})

describe('usp-2091', () => {
  const shells = new Array<number>(20).fill(96)
  const gross = [...new Array<number>(17).fill(496), 430, 430, 430]

  test('without shells it asks for them, with shells it asks for 40 more', () => {
    expect(judgeUniformity({ standard: 'usp-2091', gross })).toMatchObject({ stage: 1, verdict: 'weigh-shells', outside: [17, 18, 19] })
    expect(judgeUniformity({ standard: 'usp-2091', gross, shells })).toMatchObject({ stage: 2, verdict: 'test-40-more' })
  })

  test('a mean tare makes the contents indicative, but not a pass on intact weights', () => {
    expect(judgeUniformity({ standard: 'usp-2091', gross, shells, weighingBasis: 'net-mean-tare' }).basis).toBe('indicative')
    const even = new Array<number>(20).fill(496)
    expect(judgeUniformity({ standard: 'usp-2091', gross: even, shells, weighingBasis: 'net-mean-tare' }).basis).toBe('compendial')
  })

  test('counts by hand: seven of sixty fail, one beyond 25 % fails', () => {
    const sixty = new Array<number>(60).fill(496)
    const shells60 = new Array<number>(60).fill(96)
    const seven = sixty.map((weight, place) => (place < 7 ? 446 : weight))
    expect(judgeUniformity({ standard: 'usp-2091', gross: seven, shells: shells60 })).toMatchObject({ stage: 3, verdict: 'fail' })
    const far = sixty.map((weight, place) => (place === 5 ? 380 : weight))
    expect(judgeUniformity({ standard: 'usp-2091', gross: far, shells: shells60 })).toMatchObject({ verdict: 'fail', beyondOuter: [5] })
  })

  test.each([
    [19, undefined, 'too-few-values'],
    [40, undefined, 'too-few-values'],
    [61, undefined, 'too-many-values'],
    [60, undefined, 'lengths-differ'],
    [60, 59, 'lengths-differ'],
  ])('refuses %s capsules with %s shells: %s', (capsules, shellCount, code) => {
    const shells = shellCount === undefined ? undefined : new Array<number>(shellCount).fill(96)
    const request = { gross: new Array<number>(capsules).fill(496), shells }
    expect(() => judgeUniformity({ standard: 'usp-2091', ...request })).toThrow(expect.objectContaining({ code }))
  })

  test('refuses a shell heavier than its capsule', () => {
    const heavy = shells.with(3, 600)
    expect(() => judgeUniformity({ standard: 'usp-2091', gross, shells: heavy })).toThrow(expect.objectContaining({ code: 'not-positive' }))
  })
})

describe('ph-eur-2.9.5', () => {
  test('agrees with a count of relative deviations', () => {
    const mg = fc.integer({ min: 2000, max: 5000 }).map((tenths) => tenths / 10)
    fc.assert(
      fc.property(fc.array(mg, { minLength: 20, maxLength: 20 }), (net) => {
        const mean = net.reduce((sum, x) => sum + x, 0) / 20
        const permitted = mean < 300 ? 0.1 : 0.075
        const beyond = (share: number) => net.filter((x) => Math.abs(x / mean - 1) > share + 1e-9).length
        const expected = beyond(permitted) <= 2 && beyond(2 * permitted) === 0 ? 'pass' : 'fail'
        return judgeUniformity({ standard: 'ph-eur-2.9.5', net }).verdict === expected
      }),
    )
  })

  test.each([
    [19, 'too-few-values'],
    [21, 'too-many-values'],
  ])('refuses %s units: %s', (units, code) => {
    const net = new Array<number>(units).fill(300)
    expect(() => judgeUniformity({ standard: 'ph-eur-2.9.5', net })).toThrow(expect.objectContaining({ code }))
  })
})

test('every standard says what it follows and in which steps', () => {
  for (const { id, title, edition, stages } of STANDARDS) {
    expect(title, id).not.toBe('')
    expect(edition, id).toMatch(/\d{4}|\d\d/)
    expect(stages.length, id).toBeGreaterThan(0)
  }
})
