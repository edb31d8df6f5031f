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

export interface PhEur295Request {
  standard: 'ph-eur-2.9.5'
  /** Contents of 20 capsules, each against its own emptied shell, mg. */
  net: ArrayLike<number>
  weighingBasis?: WeighingBasis | undefined
}

/** Average and limits in mg. */
export interface PhEur295Answer extends Explained {
  standard: 'ph-eur-2.9.5'
  stage: number
  n: number
  average: number
  /** The permitted deviation, percent of the average. */
  deviationPercent: number
  limits: Limits
  /** Places, counted from 0, beyond `limits`. */
  outside: number[]
  /** Twice the permitted deviation. */
  outerLimits: Limits
  beyondOuter: number[]
  verdict: 'pass' | 'fail'
}

const EDITION = 'Ph. Eur. 2.9.5 Uniformity of mass of single-dose preparations, 01/2008:20905'
const UNITS = 20
const ALLOWED_OUTSIDE = 2

/**
 * The permitted deviation of capsules from their mean, percent: 10 below 300 mg, 7.5 from 300 mg on.
 * @param averageMg mean net mass
 * @see Ph. Eur. 2.9.5, table 2.9.5.-1
 */
export function permittedDeviationPercent(averageMg: number): number {
  // An average of exactly 300 may come out of binary arithmetic a hair below it.
  return averageMg < 300 * (1 - 1e-10) ? 10 : 7.5
}

function requireTwenty(net: ArrayLike<number>): void {
  requireValues('net', net, { min: UNITS })
  if (net.length > UNITS) throw new StatisticsError('too-many-values', 'net', `The test has 20 units; ${net.length} were given.`)
  requirePositive('net', momentsOf(net).min)
}

/**
 * Judges the contents of 20 capsules against their own mean (not against the claim).
 * @throws {StatisticsError} `too-few-values`, `too-many-values`, `not-finite`, `not-positive`
 * @see Ph. Eur. 2.9.5, capsules; check values in fixtures/reference/uniformity.json
 */
function judge({ net, weighingBasis }: PhEur295Request): PhEur295Answer {
  requireTwenty(net)
  const average = momentsOf(net).mean
  const deviationPercent = permittedDeviationPercent(average)
  const limits = limitsAround(average, deviationPercent)
  const outerLimits = limitsAround(average, 2 * deviationPercent)
  const outside = placesBeyond(net, limits)
  const beyondOuter = placesBeyond(net, outerLimits)
  const weighed = judgeBasis(weighingBasis ?? 'net-individual')
  const assumed = weighingBasis === undefined ? ['Taken as net weights, each unit against its own shell.'] : []
  const figures = { n: net.length, average, deviationPercent, limits, outside, outerLimits, beyondOuter }
  return {
    standard: 'ph-eur-2.9.5',
    stage: 1,
    ...figures,
    verdict: outside.length <= ALLOWED_OUTSIDE && beyondOuter.length === 0 ? 'pass' : 'fail',
    edition: EDITION,
    basis: weighed.basis,
    reasons: [
      `${outside.length} of 20 contents deviate from their mean by more than ${deviationPercent} %; at most 2 may.`,
      `${beyondOuter.length} deviate by more than ${2 * deviationPercent} %; none may.`,
      'The comparison is with the mean of the sample, so it says nothing about the distance from the target.',
      ...assumed,
      ...weighed.reasons,
    ],
    arithmetic: arithmeticOf(figures),
  }
}

type Figures = Pick<PhEur295Answer, 'n' | 'average' | 'deviationPercent' | 'limits' | 'outside' | 'outerLimits' | 'beyondOuter'>

function arithmeticOf({ n, average, deviationPercent, limits, outside, outerLimits, beyondOuter }: Figures): string[] {
  const band = (percent: number, { lower, upper }: Limits, beyond: number[]) =>
    `${percent} % of ${shown(average)} = ${shown((average * percent) / 100)} mg: ${shown(lower)} to ${shown(upper)} mg; beyond: ${shownPlaces(beyond)}`
  return [
    `mean contents = ${shown(average * n)} / ${n} = ${shown(average)} mg`,
    `${deviationPercent === 10 ? 'below 300 mg' : '300 mg or more'}: the permitted deviation is ${deviationPercent} %`,
    band(deviationPercent, limits, outside),
    band(2 * deviationPercent, outerLimits, beyondOuter),
  ]
}

/** Uniformity of mass of capsules. */
export const phEur295: AcceptanceStandard<PhEur295Request, PhEur295Answer> = {
  id: 'ph-eur-2.9.5',
  title: 'Uniformity of mass of single-dose preparations',
  edition: EDITION,
  stages: [
    {
      stage: 1,
      n: UNITS,
      rule: 'At most 2 of 20 deviate from the mean by more than 10 % (below 300 mg) or 7.5 %, none by more than twice that.',
    },
  ],
  judge,
}
