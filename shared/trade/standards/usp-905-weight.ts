import { requireFinite, requirePositive, requireValues, StatisticsError } from '#shared/statistics/errors.ts'
import { momentsOf } from '#shared/statistics/summary.ts'
import type { WeighingBasis } from '#shared/vocabulary.ts'
import { judgeBasis, shown, type AcceptanceStandard, type Explained } from './standard.ts'
import { judgeContents, namedLines, USP_905_EDITION, USP_905_STAGES, worstOf, type UniformityFigures } from './usp-905.ts'

/** The least amount and the least share of the fill at which weight may stand for content. */
export const WEIGHT_VARIATION_FROM = { claimMg: 25, sharePercent: 25 } as const

export interface AssayedActive {
  active: string
  /** A: the assay of the batch, percent of claim. */
  assayPercent: number
  target?: number | undefined
  /** What one unit is said to contain, mg; needed to tell whether weight may stand for content. */
  claimMg?: number | undefined
}

export interface Usp905WeightRequest {
  standard: 'usp-905-weight'
  /** Net weights of 10 or 30 units, mg. */
  weights: ArrayLike<number>
  assayPercent?: number | undefined
  target?: number | undefined
  claimMg?: number | undefined
  /** Instead of `assayPercent`: each active of a unit with several. */
  actives?: readonly AssayedActive[] | undefined
  /** How the net weights were come by; taken as each unit against its own shell unless stated. */
  weighingBasis?: WeighingBasis | undefined
}

/** Whether weight may stand for content. */
export interface Eligibility {
  isEligible: boolean
  claimMg: number
  /** Claim as a share of the mean fill, percent. */
  sharePercent: number
  sentence: string
}

interface WeightFigures extends UniformityFigures {
  /** The content of each unit, percent of claim, estimated from its weight. */
  contents: number[]
  eligibility?: Eligibility
}

export interface WeightUniformityAnswer extends WeightFigures, Explained {
  standard: 'usp-905-weight'
  actives?: ({ active: string } & WeightFigures)[]
}

/**
 * Tells whether weight variation may stand for content uniformity: the active is at least 25 mg and at least 25 % of the
 * contents of a hard capsule.
 * @param claimMg what one unit is said to contain
 * @param meanFillMg mean net weight
 * @throws {StatisticsError} `not-positive`, `not-finite`
 * @see USP <905>, table 1, as in USP 38–NF 33
 */
export function judgeEligibility(claimMg: number, meanFillMg: number): Eligibility {
  requirePositive('claimMg', claimMg)
  requirePositive('meanFillMg', meanFillMg)
  const sharePercent = (100 * claimMg) / meanFillMg
  requireFinite('claimMg', sharePercent)
  const { claimMg: leastMg, sharePercent: leastPercent } = WEIGHT_VARIATION_FROM
  const isEligible = claimMg >= leastMg && sharePercent >= leastPercent * (1 - 1e-10)
  const found = `${shown(claimMg)} mg of active are ${shown(sharePercent, 1)} % of the mean fill of ${shown(meanFillMg, 1)} mg`
  const sentence = isEligible
    ? `${found}: at least ${leastMg} mg and ${leastPercent} %, so weight may stand for content.`
    : `${found}: weight may stand for content only from ${leastMg} mg and ${leastPercent} % on. Test content instead.`
  return { isEligible, claimMg, sharePercent, sentence }
}

/**
 * The content of each unit from its net weight, if the powder is the same throughout: w·A/W̄, percent of claim.
 * @param weights net, mg, each above zero
 * @param assayPercent A, percent of claim
 * @throws {StatisticsError} `too-few-values`, `not-finite`, `not-positive`
 * @see USP <905>, weight variation, as in USP 38–NF 33
 */
export function contentsFromWeights(weights: ArrayLike<number>, assayPercent: number): number[] {
  requireValues('weights', weights, { min: 2 })
  requirePositive('assayPercent', assayPercent)
  const { mean, min } = momentsOf(weights)
  requirePositive('weights', min)
  return Array.from(weights, (weight) => (weight * assayPercent) / mean)
}

function judgeActive(weights: ArrayLike<number>, active: Omit<AssayedActive, 'active'>): WeightFigures {
  const { assayPercent, target, claimMg } = active
  const contents = contentsFromWeights(weights, assayPercent)
  const figures = judgeContents(contents, target)
  const meanMg = momentsOf(weights).mean
  const eligibility = claimMg === undefined ? undefined : judgeEligibility(claimMg, meanMg)
  const unknown = 'The claim in mg was not given, so whether weight may stand for content (25 mg and 25 %) was not checked.'
  const first = weights[0]!
  const arithmetic = [
    `W̄ = ${shown(meanMg * weights.length)} / ${weights.length} = ${shown(meanMg)} mg`,
    `content of a unit = w·A/W̄; of the first: ${shown(first)} × ${shown(assayPercent)} / ${shown(meanMg)} = ${shown(contents[0]!)}`,
    ...figures.arithmetic,
  ]
  const reasons = [...figures.reasons, eligibility?.sentence ?? unknown]
  return { ...figures, contents, reasons, arithmetic, ...(eligibility && { eligibility }) }
}

function explain(
  request: Usp905WeightRequest,
  judged: readonly WeightFigures[],
): Omit<Explained, 'arithmetic'> & { standard: 'usp-905-weight' } {
  const weighed = judgeBasis(request.weighingBasis ?? 'net-individual')
  const isEligible = judged.every(({ eligibility }) => eligibility?.isEligible !== false)
  const assumed = request.weighingBasis === undefined ? ['Taken as net weights, each unit against its own shell.'] : []
  return {
    standard: 'usp-905-weight',
    edition: USP_905_EDITION,
    basis: isEligible ? weighed.basis : 'indicative',
    reasons: [...assumed, ...weighed.reasons],
  }
}

function judge(request: Usp905WeightRequest): WeightUniformityAnswer {
  const { weights, assayPercent, target, claimMg, actives } = request
  if (actives === undefined) {
    if (assayPercent === undefined) throw new StatisticsError('not-finite', 'assayPercent', 'assayPercent must be given.')
    const judged = judgeActive(weights, { assayPercent, target, claimMg })
    const explained = explain(request, [judged])
    return { ...judged, ...explained, reasons: [...judged.reasons, ...explained.reasons] }
  }
  const judged = actives.map((each) => ({ active: each.active, ...judgeActive(weights, { ...each, target: each.target ?? target }) }))
  const { active, ...worst } = worstOf(judged)
  const explained = explain(request, judged)
  const named = judged.flatMap((each) => namedLines(each.active, each.reasons))
  const arithmetic = judged.flatMap((each) => namedLines(each.active, each.arithmetic))
  return {
    ...worst,
    ...explained,
    reasons: [...named, `The verdict is that of ${active}.`, ...explained.reasons],
    arithmetic,
    actives: judged,
  }
}

/** Uniformity of dosage units by weight variation: net weights and the assay of the batch. */
export const usp905Weight: AcceptanceStandard<Usp905WeightRequest, WeightUniformityAnswer> = {
  id: 'usp-905-weight',
  title: 'Uniformity of dosage units, by weight variation',
  edition: USP_905_EDITION,
  stages: USP_905_STAGES,
  judge,
}
