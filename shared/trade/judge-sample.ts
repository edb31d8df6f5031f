import type { VerdictReason } from '../schemas/samples.ts'
import { momentsOf } from '../statistics/summary.ts'
import type { Verdict, WeighingBasis } from '../vocabulary.ts'

/** The limits of a control plan, in percent of the target. */
export interface PlanLimits {
  meanAlertPercent: number
  meanActionPercent: number
  individualAlertPercent: number
  individualActionPercent: number
  rsdAlertPercent: number
  rsdActionPercent: number
}

export interface SampleToJudge {
  /** Weights in mg, on the basis of the plan, in the order of weighing. */
  valuesMg: readonly number[]
  basis: WeighingBasis
  targetFillMg: number
  /** Mean shell weight: gross weights are compared with target + shell, never with the target itself. */
  tareMeanMg: number | null
  limits: PlanLimits
}

export interface Judgement {
  verdict: Verdict
  reasons: VerdictReason[]
}

const SEVERITIES = ['action', 'alert'] as const
/** An SD of fewer values says too little to stop a machine by. */
const FEWEST_FOR_RSD = 6

const mg = (value: number): string => `${value.toFixed(1)} mg`

/** What the weights are compared with: the target, or target and shell together where gross weights are charted. */
export function centreOf({ basis, targetFillMg, tareMeanMg }: Pick<SampleToJudge, 'basis' | 'targetFillMg' | 'tareMeanMg'>): number {
  return basis === 'gross' ? targetFillMg + (tareMeanMg ?? 0) : targetFillMg
}

function meanReason(mean: number, centre: number, { targetFillMg, limits }: SampleToJudge): VerdictReason | undefined {
  const off = mean - centre
  for (const severity of SEVERITIES) {
    const percent = severity === 'action' ? limits.meanActionPercent : limits.meanAlertPercent
    if (Math.abs(off) <= (percent / 100) * targetFillMg) continue
    const side = off > 0 ? 'above' : 'below'
    const sentence = `The mean ${mg(mean)} is ${mg(Math.abs(off))} ${side} ${mg(centre)}; the ${severity} limit is ${percent} % (${mg((percent / 100) * targetFillMg)}).`
    return { test: `mean-${severity}`, name: off > 0 ? 'mean too high' : 'mean too low', severity, sentence }
  }
  return undefined
}

function individualReason(values: readonly number[], centre: number, { targetFillMg, limits }: SampleToJudge): VerdictReason | undefined {
  for (const severity of SEVERITIES) {
    const percent = severity === 'action' ? limits.individualActionPercent : limits.individualAlertPercent
    const limit = (percent / 100) * targetFillMg
    const outside = values.flatMap((value, place) => (Math.abs(value - centre) > limit ? [{ value, capsule: place + 1 }] : []))
    const [worst] = outside.toSorted((a, b) => Math.abs(b.value - centre) - Math.abs(a.value - centre))
    if (!worst) continue
    const count = outside.length === 1 ? `Capsule ${worst.capsule} (${mg(worst.value)}) is` : `${outside.length} capsules are`
    const farthest = outside.length === 1 ? '' : `, the farthest capsule ${worst.capsule} with ${mg(worst.value)}`
    return {
      test: `individual-${severity}`,
      name: 'single capsule out',
      severity,
      sentence: `${count} beyond the individual ${severity} limit of ${percent} % (${mg(limit)})${farthest}.`,
    }
  }
  return undefined
}

function spreadReason(values: readonly number[], { targetFillMg, limits }: SampleToJudge): VerdictReason | undefined {
  if (values.length < FEWEST_FOR_RSD) return undefined
  const { sumOfSquares, n } = momentsOf(values)
  const rsd = (100 * Math.sqrt(sumOfSquares / (n - 1))) / targetFillMg
  for (const severity of SEVERITIES) {
    const limit = severity === 'action' ? limits.rsdActionPercent : limits.rsdAlertPercent
    if (rsd <= limit) continue
    return {
      test: `rsd-${severity}`,
      name: 'spread too wide',
      severity,
      sentence: `The spread is ${rsd.toFixed(1)} % of the target fill; the ${severity} limit is ${limit} %.`,
    }
  }
  return undefined
}

/** The verdict that follows from reasons: the gravest of them. */
export function verdictOf(reasons: readonly { severity: 'alert' | 'action' }[]): Verdict {
  if (reasons.some(({ severity }) => severity === 'action')) return 'action'
  return reasons.length > 0 ? 'alert' : 'in-control'
}

/**
 * Judges a sample by the limits of its control plan: mean, single capsules, spread. Beyond is strict: a figure exactly on a
 * limit is within. Run tests, which need the samples before it, are judged where those are known.
 * The limits are the site's own, from its approved plan (trade practice; examples only in the literature).
 */
export function judgeByLimits(sample: SampleToJudge): Judgement {
  const { valuesMg } = sample
  if (valuesMg.length === 0) return { verdict: 'in-control', reasons: [] }
  const centre = centreOf(sample)
  const { mean } = momentsOf(valuesMg)
  const found = [meanReason(mean, centre, sample), individualReason(valuesMg, centre, sample), spreadReason(valuesMg, sample)]
  const reasons = found.filter((reason) => reason !== undefined)
  return { verdict: verdictOf(reasons), reasons }
}
