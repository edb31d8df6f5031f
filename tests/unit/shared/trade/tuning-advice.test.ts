import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import type { Trial } from '#shared/statistics/tuning.ts'
import { LEVER_TABLE } from '#shared/trade/tamping.ts'
import { adviseTuning, type TuningRequest } from '#shared/trade/tuning-advice.ts'
import { leverNamed, usualPrior } from '#shared/trade/tuning-levers.ts'

const PROFILE = { 'penetration-1': 30, 'penetration-2': 27, 'penetration-3': 24, 'penetration-4': 21, 'penetration-5': 18 }

function trial(meanMg: number, settings: Record<string, number> = {}, sdMg = 8): Trial {
  return { settings: { ...PROFILE, ...settings }, meanMg, sdMg, n: 20 }
}

const request = (history: Trial[], more: Partial<TuningRequest> = {}): TuningRequest => ({ history, target: 400, ...more })

describe('the recommendation', () => {
  test('too light: one fine station deeper, towards the target, with an interval around the prediction', () => {
    const { recommendation, slopes } = adviseTuning(request([trial(390)]))
    expect(['penetration-3', 'penetration-4', 'penetration-5']).toContain(recommendation.lever)
    expect(recommendation.to).toBeGreaterThan(recommendation.from)
    expect(recommendation.to - recommendation.from).toBeLessThanOrEqual(0.5)
    expect(recommendation.predictedMeanMg).toBeGreaterThan(390)
    expect(recommendation.interval[0]).toBeLessThan(recommendation.predictedMeanMg)
    expect(recommendation.interval[1]).toBeGreaterThan(recommendation.predictedMeanMg)
    expect(Object.keys(slopes)).toEqual(Object.keys(PROFILE))
  })

  test('far too heavy: a coarse station less deep', () => {
    const { recommendation } = adviseTuning(request([trial(440)]))
    expect(['penetration-1', 'penetration-2']).toContain(recommendation.lever)
    expect(recommendation.to).toBeLessThan(recommendation.from)
  })

  test('a learned slope sizes the move: 5 mg at 10 mg a millimetre is 0.5 mm', () => {
    const history = [19, 19.5, 20, 20.5, 21, 20.5, 20, 19.5, 20, 20.5].map((depth) =>
      trial(395 + 10 * (depth - 20.5), { 'penetration-4': depth }, 3),
    )
    const { recommendation, slopes } = adviseTuning(request(history, { lever: 'penetration-4' }))
    expect(slopes['penetration-4']?.mgPerUnit).toBeCloseTo(10, 0)
    expect(recommendation).toMatchObject({ lever: 'penetration-4', from: 20.5, to: 21 })
    expect(Math.abs(recommendation.predictedMeanMg - 400)).toBeLessThan(1)
  })

  test('never moves further than a step, nor away from the target, and only one lever that exists', () => {
    const means = fc.array(fc.integer({ min: 3500, max: 4500 }), { minLength: 1, maxLength: 7 })
    fc.assert(
      fc.property(means, (tenths) => {
        const history = tenths.map((mean) => trial(mean / 10))
        const { recommendation } = adviseTuning(request(history))
        const { lever, from, to } = recommendation
        const step = LEVER_TABLE.find(({ id }) => id === lever)!.maxMove!.coarse
        expect(Math.abs(to - from)).toBeLessThanOrEqual(step + 1e-9)
        expect(from).toBe(PROFILE[lever as keyof typeof PROFILE])
        const settled = Math.abs(history.at(-1)!.meanMg - 400) <= (2 * 8) / Math.sqrt(20)
        if (settled) expect(to).toBe(from)
      }),
      { numRuns: 40 },
    )
  })

  test('where a larger reading is lighter, the move is the other way', () => {
    const levers = Object.fromEntries(Object.keys(PROFILE).map((lever) => [lever, { direction: -1 as const }]))
    const { recommendation } = adviseTuning(request([trial(390)], { levers }))
    expect(recommendation.to).toBeLessThan(recommendation.from)
  })

  test('the end of the scale stops a move and is told', () => {
    const { recommendation, cautions } = adviseTuning(
      request([trial(390)], { lever: 'penetration-4', levers: { 'penetration-4': { max: 21.1 } } }),
    )
    expect(recommendation.to).toBe(21.1)
    expect(cautions.join(' ')).toContain('end of its scale')
  })

  test('a setting of unknown kind is not moved before its effect is known, and is once it has shown one', () => {
    const plain = (setting: number, meanMg: number): Trial => ({ settings: { knob: setting }, meanMg, sdMg: 3, n: 20 })
    const first = adviseTuning(request([plain(5, 385)]))
    expect(first.recommendation.to).toBe(first.recommendation.from)
    const learned = adviseTuning(request([plain(5, 380), plain(6, 384), plain(7, 388), plain(6, 384), plain(7, 388)]))
    expect(learned.recommendation).toMatchObject({ lever: 'knob', from: 7, to: 9 })
  })
})

describe('cautions', () => {
  const said = (history: Trial[], more: Partial<TuningRequest> = {}) => adviseTuning(request(history, more)).cautions.join('\n')

  test('spread is the problem, depth will not cure it', () => {
    expect(said([trial(390, {}, 20)])).toContain('Depth will not cure it')
    expect(said([trial(390)])).not.toContain('spread')
    expect(said([trial(390)], { rsdLimitPercent: 1.5 })).toContain('Depth will not cure it')
  })

  test('over-adjustment: the last moves chased noise', () => {
    const history = [
      trial(401),
      trial(399, { 'penetration-4': 20.9 }),
      trial(402, { 'penetration-4': 21.1 }),
      trial(398, { 'penetration-4': 20.8 }),
    ]
    expect(said(history)).toContain('chased noise')
  })

  test('means that swing past the target in turn are over-adjustment too', () => {
    const depths = [21, 22, 21, 22]
    const history = depths.map((depth, place) => trial(place % 2 === 0 ? 390 : 410, { 'penetration-4': depth }))
    expect(said(history)).toContain('in turn')
  })

  test('within 1 % of the target nothing is moved', () => {
    const { recommendation, cautions } = adviseTuning(request([trial(401)]))
    expect(recommendation.to).toBe(recommendation.from)
    expect(cautions).toContain('Within ±1 % of the target: leave it.')
  })

  test('a deviation that the sampling alone explains asks for more capsules', () => {
    expect(said([{ ...trial(394), sdMg: 14, n: 10 }])).toContain('weigh more capsules')
  })

  test('a last mean that does not fit sends to the scale or to the event log', () => {
    const steady = [trial(390), trial(391), trial(390), trial(389), trial(390)]
    expect(said([...steady, trial(425)])).toContain('event log')
    expect(said([...steady, trial(340, { 'penetration-4': 21.5 })])).toContain('screw may have slipped')
  })

  test('several settings moved at once, and many trials without end, are told', () => {
    expect(said([trial(380), trial(390, { 'penetration-3': 24.5, 'penetration-4': 21.5 })])).toContain('One lever a trial')
    expect(said(Array.from({ length: 6 }, () => trial(380)))).toContain('ask the fitter or engineer')
  })

  test('a move always comes with the caution about the running machine', () => {
    expect(said([trial(390)])).toContain('stopped and isolated')
    expect(said([trial(400)])).not.toContain('stopped and isolated')
  })
})

describe('what is believed beforehand', () => {
  test.each([
    ['penetration-4', 'penetration-4'],
    ['penetrationStation2Mm', 'penetration-2'],
    ['station 5', 'penetration-5'],
    ['penetration-all', 'penetration-all'],
    ['bedHeightMm', 'bed-height'],
    ['speed', 'speed'],
    ['discThickness', 'disc-thickness'],
  ])('the setting %s is the lever %s', (setting, id) => expect(leverNamed(setting)?.id).toBe(id))

  test('geometry bounds the slope of a station: 30 to 100 % of the ceiling', () => {
    const geometry = { boreDiameterMm: 7, bulkDensityGPerMl: 0.45 }
    const { mgPerUnit, sd } = usualPrior('penetration-4', { target: 400, reading: 21, geometry })
    expect(mgPerUnit).toBeCloseTo(0.65 * 17.318, 2)
    expect(mgPerUnit + sd).toBeCloseTo(17.318, 2)
  })
})

test.each([
  [{ history: [], target: 400 }, 'too-few-values'],
  [{ history: [trial(390)], target: 0 }, 'not-positive'],
  [{ history: [trial(390)], target: 400, lever: 'penetration-9' }, 'unknown-option'],
  [{ history: [{ ...trial(390), settings: {} }], target: 400 }, 'too-few-values'],
  [{ history: [trial(390)], target: 400, rsdLimitPercent: 0 }, 'not-positive'],
])('refuses what it cannot advise on (%#)', (each, code) => {
  expect(() => adviseTuning(each)).toThrow(expect.objectContaining({ code }))
})
