import {
  acceptanceValue,
  highestReference,
  referenceValue,
  roundAcceptanceValue,
  UNIFORMITY_RULE,
} from '#shared/statistics/acceptance-value.ts'
import { requirePositive, requireValues, StatisticsError } from '#shared/statistics/errors.ts'
import { summarise } from '#shared/statistics/summary.ts'
import { placesBeyond, shown, shownPlaces, type AcceptanceStandard, type Explained, type Limits } from './standard.ts'

export type UniformityVerdict = 'pass' | 'fail' | 'test-20-more'

/** The acceptance value of one active and what follows from it. Contents, mean, SD, M and limits are percent of claim. */
export interface UniformityFigures {
  stage: number
  n: number
  mean: number
  sd: number
  k: number
  /** T, the target content. */
  target: number
  /** M. */
  referenceValue: number
  /** Unrounded. */
  acceptanceValue: number
  /** As compared with the limit. */
  roundedAcceptanceValue: number
  limit: number
  /** 0.75·M and 1.25·M; they bind at the second stage. */
  individualLimits: Limits
  /** Places, counted from 0, beyond the individual limits. */
  outside: number[]
  verdict: UniformityVerdict
  reasons: string[]
  arithmetic: string[]
}

export interface ActiveContents {
  active: string
  /** Percent of claim, one a unit. */
  contents: ArrayLike<number>
  target?: number | undefined
}

export interface Usp905Request {
  standard: 'usp-905'
  /** Percent of claim, 10 or 30 units. */
  contents?: ArrayLike<number> | undefined
  /** T in percent of claim, 100 unless stated. */
  target?: number | undefined
  /** Instead of `contents`: each active of a unit with several. */
  actives?: readonly ActiveContents[] | undefined
}

/** The figures of the deciding active, and, for a unit of several actives, those of each. */
export interface UniformityAnswer extends UniformityFigures, Explained {
  standard: 'usp-905'
  actives?: ({ active: string } & UniformityFigures)[]
}

export const USP_905_EDITION = 'USP <905>, harmonised with Ph. Eur. 2.9.40 and JP 6.02; text of USP 38–NF 33, second supplement 2015'

export const USP_905_STAGES = UNIFORMITY_RULE.stages.map(({ stage, n, k }) => ({
  stage,
  n,
  rule: `AV = |M − X̄| + ${k}·s of ${n} units is at most ${UNIFORMITY_RULE.limit}.0${stage === 2 ? ', and every unit lies from 0.75·M to 1.25·M' : ''}`,
}))

/**
 * Judges the contents of one active by the acceptance value, at the stage that their number says.
 *
 * Formula  M = X̄ kept inside 98.5 and 101.5 (or T, if higher); AV = |M − X̄| + k·s with k = 2.4 for 10 units and 2.0 for 30.
 *          Passes when AV, rounded to one decimal, is at most 15.0 and, with 30 units, each lies from 0.75·M to 1.25·M.
 * @param contents percent of claim, exactly 10 or exactly 30
 * @param target T in percent of claim
 * @throws {StatisticsError} `too-few-values`, `too-many-values`, `not-finite`, `not-positive`
 * @see USP <905> table 2, General Notices 7.10 and 7.20; check values in fixtures/reference/uniformity.json
 */
export function judgeContents(contents: ArrayLike<number>, target = 100): UniformityFigures {
  requirePositive('target', target)
  const { stage, n, k } = stageFor(contents)
  const { mean, sd } = summarise(contents)
  const m = referenceValue(mean, target)
  const value = acceptanceValue({ mean, sd, k }, target)
  const rounded = roundAcceptanceValue(value)
  const share = UNIFORMITY_RULE.unitLimitPercent / 100
  const individualLimits = { lower: (1 - share) * m, upper: (1 + share) * m }
  const outside = placesBeyond(contents, individualLimits)
  const figures = { stage, n, mean, sd, k, target, referenceValue: m, acceptanceValue: value, roundedAcceptanceValue: rounded }
  const judged = { ...figures, limit: UNIFORMITY_RULE.limit, individualLimits, outside }
  return { ...judged, ...verdictOf(judged), arithmetic: arithmeticOf(judged) }
}

type Judged = Omit<UniformityFigures, 'verdict' | 'reasons' | 'arithmetic'>

function stageFor(contents: ArrayLike<number>): (typeof UNIFORMITY_RULE.stages)[number] {
  requireValues('contents', contents, { min: 10 })
  const found = UNIFORMITY_RULE.stages.find(({ n }) => n === contents.length)
  if (found) return found
  const [code, need] =
    contents.length < 30 ? (['too-few-values', 'has 10 units, or 30'] as const) : (['too-many-values', 'ends at 30 units'] as const)
  throw new StatisticsError(code, 'contents', `The uniformity test ${need}; ${contents.length} were given.`)
}

function verdictOf(judged: Judged): { verdict: UniformityVerdict; reasons: string[] } {
  const { stage, roundedAcceptanceValue, limit, outside, individualLimits } = judged
  const isWithin = roundedAcceptanceValue <= limit
  const sentence = `The acceptance value ${roundedAcceptanceValue.toFixed(1)} is ${isWithin ? 'not above' : 'above'} ${limit.toFixed(1)}.`
  if (stage === 1) {
    if (isWithin) return { verdict: 'pass', reasons: [sentence] }
    return { verdict: 'test-20-more', reasons: [sentence, 'Ten units cannot fail: test 20 more and judge all 30.'] }
  }
  const range = `${shown(individualLimits.lower)} to ${shown(individualLimits.upper)}`
  const units =
    outside.length === 0
      ? `Every unit lies from 0.75·M to 1.25·M (${range}).`
      : `Outside 0.75·M to 1.25·M (${range}): ${shownPlaces(outside)}.`
  return { verdict: isWithin && outside.length === 0 ? 'pass' : 'fail', reasons: [sentence, units] }
}

function arithmeticOf({ stage, n, mean, sd, k, target, ...rest }: Judged): string[] {
  const { referenceValue: m, acceptanceValue: value, roundedAcceptanceValue: rounded, limit, individualLimits } = rest
  const high = highestReference(target)
  const window =
    mean < UNIFORMITY_RULE.lowestReference
      ? `X̄ < 98.5, so M = 98.5`
      : mean > high
        ? `X̄ > ${shown(high)}, so M = ${shown(high)}`
        : `98.5 ≤ X̄ ≤ ${shown(high)}, so M = X̄ = ${shown(m)}`
  const lines = [
    `T = ${shown(target)}, so the window of the mean is 98.5 to ${shown(high)}`,
    `X̄ = ${shown(mean * n)} / ${n} = ${shown(mean)}`,
    `s = √(Σ(x − X̄)² / (n − 1)) = √(${shown(sd * sd * (n - 1))} / ${n - 1}) = ${shown(sd)}`,
    window,
    `AV = |M − X̄| + k·s = |${shown(m)} − ${shown(mean)}| + ${k} × ${shown(sd)} = ${shown(value)}`,
    `AV to one decimal: ${rounded.toFixed(1)} ${rounded <= limit ? '≤' : '>'} L1 = ${limit.toFixed(1)}`,
  ]
  if (stage === 1) return lines
  return [
    ...lines,
    `0.75·M = 0.75 × ${shown(m)} = ${shown(individualLimits.lower)}; 1.25·M = 1.25 × ${shown(m)} = ${shown(individualLimits.upper)}`,
  ]
}

/**
 * The verdict on a unit of several actives is that of the worst of them: every active has to pass.
 * @param judged each active with its figures, at least one
 * @throws {StatisticsError} `too-few-values`
 */
export function worstOf<T extends UniformityFigures>(judged: readonly T[]): T {
  const [first, ...others] = judged
  if (!first) throw new StatisticsError('too-few-values', 'actives', 'actives needs at least one active.')
  const rank = { pass: 0, 'test-20-more': 1, fail: 2 }
  const isWorse = (one: T, other: T) => rank[one.verdict] - rank[other.verdict] || one.acceptanceValue - other.acceptanceValue
  return others.reduce((worst, each) => (isWorse(each, worst) > 0 ? each : worst), first)
}

/** Writes the name of an active before each of its sentences. */
export function namedLines(active: string, lines: readonly string[]): string[] {
  return lines.map((line) => `${active}: ${line}`)
}

function judge({ contents, target, actives }: Usp905Request): UniformityAnswer {
  const explained = { standard: 'usp-905', edition: USP_905_EDITION, basis: 'compendial' } as const
  if (actives === undefined) {
    if (contents === undefined) throw new StatisticsError('too-few-values', 'contents', 'contents needs the contents of 10 or 30 units.')
    return { ...judgeContents(contents, target), ...explained }
  }
  const judged = actives.map((each) => ({ active: each.active, ...judgeContents(each.contents, each.target ?? target) }))
  const { active, ...worst } = worstOf(judged)
  const reasons = [...judged.flatMap((each) => namedLines(each.active, each.reasons)), `The verdict is that of ${active}.`]
  return {
    ...worst,
    ...explained,
    reasons,
    arithmetic: judged.flatMap((each) => namedLines(each.active, each.arithmetic)),
    actives: judged,
  }
}

/** Uniformity of dosage units by content, of one active or of several. */
export const usp905: AcceptanceStandard<Usp905Request, UniformityAnswer> = {
  id: 'usp-905',
  title: 'Uniformity of dosage units, by content',
  edition: USP_905_EDITION,
  stages: USP_905_STAGES,
  judge,
}
