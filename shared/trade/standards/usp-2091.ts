import { requirePositive, requireValues, StatisticsError } from '#shared/statistics/errors.ts'
import { momentsOf } from '#shared/statistics/summary.ts'
import type { WeighingBasis } from '#shared/vocabulary.ts'
import {
  judgeBasis,
  limitsAround,
  placesBeyond,
  shown,
  shownPlaces,
  type AcceptanceStandard,
  type Explained,
  type Limits,
} from './standard.ts'

export type Usp2091Verdict = 'pass' | 'fail' | 'weigh-shells' | 'test-40-more'

export interface Usp2091Request {
  standard: 'usp-2091'
  /** Intact capsules, mg: 20, or 60 after the second sample. */
  gross: ArrayLike<number>
  /** The emptied shell of each capsule, mg, in the same order. */
  shells?: ArrayLike<number> | undefined
  /** `net-mean-tare` where `shells` repeats one mean shell weight. */
  weighingBasis?: WeighingBasis | undefined
}

/** Limits and average are of the weights that decided: gross at the first step, net from the second on; mg. */
export interface Usp2091Answer extends Explained {
  standard: 'usp-2091'
  stage: number
  n: number
  average: number
  /** 90 % and 110 % of the average. */
  limits: Limits
  /** Places, counted from 0, beyond `limits`. */
  outside: number[]
  /** 75 % and 125 % of the average; they bind from the second step on. */
  outerLimits: Limits
  beyondOuter: number[]
  verdict: Usp2091Verdict
}

const INNER_PERCENT = 10
const OUTER_PERCENT = 25
/** How many may lie beyond 10 %: of 20 to pass at once, of 20 to be given 40 more, of 60. */
const ALLOWED = { of20: 2, for40More: 6, of60: 6 }

const EDITION =
  'USP <2091> Weight Variation of Dietary Supplements, hard capsules; text of USP 32–NF 27, limits unchanged in the text official 1 December 2019'

function measure(weights: ArrayLike<number>): Pick<Usp2091Answer, 'n' | 'average' | 'limits' | 'outside' | 'outerLimits' | 'beyondOuter'> {
  const average = momentsOf(weights).mean
  const limits = limitsAround(average, INNER_PERCENT)
  const outerLimits = limitsAround(average, OUTER_PERCENT)
  const outside = placesBeyond(weights, limits)
  return { n: weights.length, average, limits, outside, outerLimits, beyondOuter: placesBeyond(weights, outerLimits) }
}

function netOf(gross: ArrayLike<number>, shells: ArrayLike<number>): number[] {
  if (shells.length !== gross.length) {
    const message = `shells needs one weight for each of the ${gross.length} capsules, but has ${shells.length}.`
    throw new StatisticsError('lengths-differ', 'shells', message)
  }
  requireValues('shells', shells, { min: 1 })
  return Array.from(gross, (weight, place) => {
    requirePositive(`gross[${place}] − shells[${place}]`, weight - shells[place]!)
    return weight - shells[place]!
  })
}

function requireCapsules(gross: ArrayLike<number>): void {
  requireValues('gross', gross, { min: 20 })
  if (gross.length === 20 || gross.length === 60) return
  const code = gross.length < 60 ? 'too-few-values' : 'too-many-values'
  throw new StatisticsError(code, 'gross', `The test has 20 capsules, or 60 with the second sample; ${gross.length} were given.`)
}

function arithmeticOf(what: string, measured: ReturnType<typeof measure>): string[] {
  const { n, average, limits, outside, outerLimits, beyondOuter } = measured
  return [
    `mean ${what} weight = ${shown(average * n)} / ${n} = ${shown(average)} mg`,
    `10 %: 0.9 × ${shown(average)} = ${shown(limits.lower)} mg to 1.1 × ${shown(average)} = ${shown(limits.upper)} mg; beyond: ${shownPlaces(outside)}`,
    `25 %: 0.75 × ${shown(average)} = ${shown(outerLimits.lower)} mg to 1.25 × ${shown(average)} = ${shown(outerLimits.upper)} mg; beyond: ${shownPlaces(beyondOuter)}`,
  ]
}

function verdictOn({ n, outside, beyondOuter }: ReturnType<typeof measure>): { verdict: Usp2091Verdict; reasons: string[] } {
  const count = outside.length
  const said = `${count} of ${n} contents differ from their mean by more than 10 %, ${beyondOuter.length} by more than 25 %.`
  if (beyondOuter.length > 0) return { verdict: 'fail', reasons: [said, 'None may differ by more than 25 %.'] }
  if (n === 60) return { verdict: count <= ALLOWED.of60 ? 'pass' : 'fail', reasons: [said, 'At most 6 of 60 may.'] }
  if (count <= ALLOWED.of20) return { verdict: 'pass', reasons: [said, 'At most 2 of 20 may.'] }
  if (count <= ALLOWED.for40More)
    return { verdict: 'test-40-more', reasons: [said, 'With 3 to 6 of 20, 40 more capsules are weighed and all 60 judged.'] }
  return { verdict: 'fail', reasons: [said, 'More than 6 of 20 leave no second sample.'] }
}

function judgeGross(gross: ArrayLike<number>): {
  answer: Omit<Usp2091Answer, keyof Explained | 'standard'>
  reasons: string[]
  arithmetic: string[]
} {
  const measured = measure(gross)
  const isMet = measured.outside.length === 0
  const reasons = isMet
    ? ['Every intact capsule weighs from 90 % to 110 % of the mean: the shells need not be weighed.']
    : [`Beyond 90 % to 110 % of the mean intact weight: ${shownPlaces(measured.outside)}. Weigh the shells and judge the contents.`]
  return {
    answer: { ...measured, stage: 1, verdict: isMet ? 'pass' : 'weigh-shells' },
    reasons,
    arithmetic: arithmeticOf('intact', measured),
  }
}

/**
 * Judges hard capsules in the order of the chapter: intact weights first, contents only if those do not pass, 40 more
 * capsules only if 3 to 6 of 20 contents lie beyond 10 % and none beyond 25 %.
 * @throws {StatisticsError} `too-few-values`, `too-many-values`, `lengths-differ`, `not-finite`, `not-positive`
 * @see USP <2091>, hard capsules; check values in fixtures/reference/uniformity.json
 */
function judge({ gross, shells, weighingBasis = 'net-individual' }: Usp2091Request): Usp2091Answer {
  requireCapsules(gross)
  const intact = judgeGross(gross)
  const explained = { standard: 'usp-2091', edition: EDITION } as const
  const needsContents = gross.length === 60 || intact.answer.verdict === 'weigh-shells'
  if (!needsContents || (shells === undefined && gross.length === 20)) {
    return { ...intact.answer, ...explained, basis: 'compendial', reasons: intact.reasons, arithmetic: intact.arithmetic }
  }
  const net = measure(netOf(gross, shells ?? []))
  const { verdict, reasons } = verdictOn(net)
  const weighed = judgeBasis(weighingBasis)
  const before = gross.length === 20 ? intact : { reasons: [], arithmetic: [] }
  return {
    ...net,
    ...explained,
    stage: gross.length === 20 ? 2 : 3,
    verdict,
    basis: weighed.basis,
    reasons: [...before.reasons, ...reasons, ...weighed.reasons],
    arithmetic: [...before.arithmetic, ...arithmeticOf('net', net)],
  }
}

/** Weight variation of hard capsules in all its steps. */
export const usp2091: AcceptanceStandard<Usp2091Request, Usp2091Answer> = {
  id: 'usp-2091',
  title: 'Weight variation of hard capsules',
  edition: EDITION,
  stages: [
    { stage: 1, n: 20, rule: 'Every intact capsule weighs from 90 % to 110 % of the mean.' },
    { stage: 2, n: 20, rule: 'At most 2 contents differ from their mean by more than 10 %, none by more than 25 %.' },
    { stage: 3, n: 60, rule: 'After 3 to 6 beyond 10 %: at most 6 of 60 contents differ by more than 10 %, none by more than 25 %.' },
  ],
  judge,
}
