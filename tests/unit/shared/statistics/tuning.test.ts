import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { normalCumulative } from '#shared/statistics/distributions/normal.ts'
import { normalDraws } from '#shared/statistics/normal-draws.ts'
import { seededRandom } from '#shared/statistics/random.ts'
import { fitTuning, mixtureQuantile, type SlopePrior, type Trial } from '#shared/statistics/tuning.ts'

const LEVER = 'penetration-4'
const prior: Record<string, SlopePrior> = { [LEVER]: { mgPerUnit: 11, sd: 6 } }

function trial(setting: number, meanMg: number, sdMg = 8, n = 20): Trial {
  return { settings: { [LEVER]: setting }, meanMg, sdMg, n }
}

/** The posterior of one slope by adding up prior × likelihood over a grid of level, slope and scatter. */
function byBruteForce(history: Trial[], { mgPerUnit, sd }: SlopePrior, target: number): { mean: number; sd: number } {
  const last = history.at(-1)!.settings[LEVER]!
  const logDensity = (x: number, mean: number, spread: number) => -0.5 * ((x - mean) / spread) ** 2 - Math.log(spread)
  let [total, first, second] = [0, 0, 0]
  for (let t = 0; t < 60; t++) {
    const scatter = ((t + 0.5) / 60) * 0.04 * target
    for (let a = -100; a <= 100; a++) {
      const level = history.at(-1)!.meanMg + a * 0.3
      for (let b = -60; b <= 60; b++) {
        const slope = mgPerUnit + (b / 10) * sd
        const misfit = history.map((each) => {
          const spread = Math.sqrt(scatter ** 2 + each.sdMg ** 2 / each.n)
          return logDensity(each.meanMg, level + slope * (each.settings[LEVER]! - last), spread)
        })
        const before = logDensity(slope, mgPerUnit, sd) + logDensity(level, target, target / 2) - 0.5 * (scatter / (0.01 * target)) ** 2
        const weight = Math.exp(misfit.reduce((sum, value) => sum + value, before))
        total += weight
        first += weight * slope
        second += weight * slope * slope
      }
    }
  }
  const mean = first / total
  return { mean, sd: Math.sqrt(second / total - mean * mean) }
}

describe('the tuning model', () => {
  test('agrees with prior times likelihood, added up by brute force', () => {
    const history = [trial(20, 388), trial(20.5, 391), trial(21, 399)]
    const expected = byBruteForce(history, prior[LEVER]!, 400)
    const { mgPerUnit, sd } = fitTuning(history, prior, 400).slopes[LEVER]!
    expect(mgPerUnit).toBeCloseTo(expected.mean, 2)
    expect(sd).toBeCloseTo(expected.sd, 2)
  })

  test('one trial, or a setting that never moved, leaves the slope as it was believed', () => {
    const { slopes } = fitTuning([trial(20, 388), trial(20, 392)], prior, 400)
    expect(slopes[LEVER]?.mgPerUnit).toBeCloseTo(11, 9)
    expect(slopes[LEVER]?.sd).toBeCloseTo(6, 9)
    expect(slopes[LEVER]?.interval[0]).toBeCloseTo(11 - 1.959964 * 6, 4)
  })

  test('learns the true slope from many trials, whatever was believed', () => {
    const draw = normalDraws(seededRandom(8))
    const history = Array.from({ length: 60 }, (_, place) => trial(18 + (place % 5), 400 + 10 * ((place % 5) - 2) + 2 * draw()))
    const { mgPerUnit, sd } = fitTuning(history, { [LEVER]: { mgPerUnit: 3, sd: 10 } }, 400).slopes[LEVER]!
    expect(Math.abs(mgPerUnit - 10)).toBeLessThan(4 * sd)
    expect(sd).toBeLessThan(0.4)
  })

  test('the prediction interval holds the next mean about 95 times in 100', () => {
    const draw = normalDraws(seededRandom(17))
    let held = 0
    for (let run = 0; run < 300; run++) {
      const weigh = (setting: number) => trial(setting, 400 + 10 * (setting - 21) + 2 * draw() + (8 / Math.sqrt(20)) * draw())
      const history = [19, 19.5, 20, 20.5, 20, 21, 20.5].map(weigh)
      const { interval } = fitTuning(history, prior, 400).predict({ [LEVER]: 21.5 }, { n: 20, sdMg: 8 })
      const next = weigh(21.5).meanMg
      if (next >= interval[0] && next <= interval[1]) held++
    }
    expect(held / 300).toBeGreaterThan(0.9)
    expect(held / 300).toBeLessThan(0.995)
  })

  test('scaling all weights scales every figure, and shifting a scale changes none', () => {
    const weights = fc.array(fc.tuple(fc.integer({ min: 180, max: 220 }), fc.integer({ min: 3700, max: 4300 })), {
      minLength: 1,
      maxLength: 8,
    })
    fc.assert(
      fc.property(weights, fc.double({ min: 0.1, max: 5, noNaN: true }), (rows, factor) => {
        const history = rows.map(([setting, mean]) => trial(setting / 10, mean / 10))
        const plain = fitTuning(history, prior, 400)
        const scaledPrior = { [LEVER]: { mgPerUnit: 11 * factor, sd: 6 * factor } }
        const scaled = fitTuning(
          history.map((each) => ({ ...each, meanMg: each.meanMg * factor, sdMg: each.sdMg * factor })),
          scaledPrior,
          400 * factor,
        )
        expect(scaled.slopes[LEVER]!.mgPerUnit / (factor * plain.slopes[LEVER]!.mgPerUnit)).toBeCloseTo(1, 6)
        const moved = fitTuning(
          history.map((each) => ({ ...each, settings: { [LEVER]: each.settings[LEVER]! + 50 } })),
          prior,
          400,
        )
        expect(moved.slopes[LEVER]!.mgPerUnit).toBeCloseTo(plain.slopes[LEVER]!.mgPerUnit, 6)
      }),
      { numRuns: 25 },
    )
  })

  test('a setting that a trial leaves out stays where it was', () => {
    const short = [trial(20, 388), { ...trial(21, 398) }, { settings: {}, meanMg: 399, sdMg: 8, n: 20 }]
    const long = [trial(20, 388), trial(21, 398), trial(21, 399)]
    expect(fitTuning(short, prior, 400).slopes).toEqual(fitTuning(long, prior, 400).slopes)
  })

  test('the quantile of a mixture gives back its probability', () => {
    const parts = [
      { weight: 0.3, mean: 0, sd: 1 },
      { weight: 0.7, mean: 5, sd: 0.5 },
    ]
    for (const probability of [0.001, 0.025, 0.3, 0.5, 0.975]) {
      const at = mixtureQuantile(parts, probability)
      const below = parts.reduce((sum, { weight, mean, sd }) => sum + weight * normalCumulative((at - mean) / sd), 0)
      expect(below).toBeCloseTo(probability, 10)
    }
  })

  test('gives finite figures or a refusal for any finite trials', () => {
    const any = fc.double({ noNaN: true, noDefaultInfinity: true })
    const positive = fc.double({ min: Number.MIN_VALUE, noNaN: true, noDefaultInfinity: true })
    const row = fc.record({ settings: fc.record({ [LEVER]: any }), meanMg: positive, sdMg: positive, n: fc.integer({ min: 2, max: 1000 }) })
    fc.assert(
      fc.property(fc.array(row, { minLength: 1, maxLength: 5 }), positive, (history, target) => {
        try {
          const { slopes, predict } = fitTuning(history, prior, target)
          const { meanMg, levelSd, interval } = predict({}, { n: 20, sdMg: 8 })
          const { mgPerUnit, sd, interval: credible } = slopes[LEVER]!
          for (const figure of [meanMg, levelSd, ...interval, mgPerUnit, sd, ...credible]) expect(figure).toSatisfy(Number.isFinite)
        } catch (error) {
          expect(error).toMatchObject({ name: 'StatisticsError' })
        }
      }),
      { numRuns: 300 },
    )
  })

  test.each([
    [[], prior, 400, 'too-few-values'],
    [[trial(20, 0)], prior, 400, 'not-positive'],
    [[trial(Number.NaN, 400)], prior, 400, 'not-finite'],
    [[trial(20, 400, -1)], prior, 400, 'out-of-range'],
    [[trial(20, 400, 8, 1)], prior, 400, 'out-of-range'],
    [[trial(20, 400, 8, 2.5)], prior, 400, 'not-whole'],
    [[trial(20, 400)], {}, 400, 'unknown-option'],
    [[trial(20, 400)], { [LEVER]: { mgPerUnit: 1, sd: 0 } }, 400, 'not-positive'],
    [[trial(20, 400)], prior, -5, 'not-positive'],
  ])('refuses what it cannot learn from (%#)', (history, priors, target, code) => {
    expect(() => fitTuning(history, priors as Record<string, SlopePrior>, target)).toThrow(expect.objectContaining({ code }))
  })
})
