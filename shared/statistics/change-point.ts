import { requireValues } from './errors.ts'
import { seededRandom } from './random.ts'
import { momentsOf, summarise } from './summary.ts'

export interface ChangePoint {
  /** The first value after the change, counted from 0. */
  index: number
  /** Minus two log likelihood ratio: n·ln(SS₀/SS₁). */
  statistic: number
  maximumT: number
  /** By permutation: how often chance alone splits as well. */
  pValue: number
  /** Places at which a change is about as likely as at the best one. */
  interval: [number, number]
  before: { n: number; mean: number; sd: number | null }
  after: { n: number; mean: number; sd: number | null }
}

const PERMUTATIONS = 1_999
/** Work is bounded: long records are permuted fewer times. */
const MOST_STEPS = 4_000_000
const SEED = 20_240_601
/** χ² with one degree of freedom at 95 %, halved, as a drop of the log likelihood. */
const LIKELIHOOD_DROP = 1.920729410347062

/** For each split, how much of the sum of squares the split explains: n₁·n₂/n·(x̄₂ − x̄₁)². */
function explained(deviations: Float64Array, onto: Float64Array): { best: number; index: number } {
  const n = deviations.length
  let sum = 0
  let best = -1
  let index = 1
  for (let split = 1; split < n; split++) {
    sum += deviations[split - 1]!
    const gain = (sum * sum * n) / (split * (n - split))
    onto[split] = gain
    if (gain > best) {
      best = gain
      index = split
    }
  }
  return { best, index }
}

function shuffle(values: Float64Array, random: () => number): void {
  for (let last = values.length - 1; last > 0; last--) {
    const other = Math.floor(random() * (last + 1))
    const kept = values[last]!
    values[last] = values[other]!
    values[other] = kept
  }
}

/**
 * The one place where the mean changed, if it did.
 *
 * Method  the split that leaves the smallest sum of squares (likelihood ratio for one change in mean, common variance);
 *         p-value by permutation with a fixed seed; interval: the splits whose likelihood is within half a χ²(1; 95 %).
 * @param values at least 4 finite numbers in order
 * @throws {StatisticsError} `too-few-values`, `not-finite`
 * @see G. W. Cobb, Biometrika 65 (1978) 243-251; A. N. Pettitt, Applied Statistics 28 (1979) 126-135; fixtures/reference/{change-point,change-point-statistics}.json
 */
export function findChangePoint(values: ArrayLike<number>): ChangePoint {
  requireValues('values', values, { min: 4 })
  const { mean, sumOfSquares, n } = momentsOf(values)
  const deviations = Float64Array.from(values, (value) => value - mean)
  const gains = new Float64Array(n)
  const { best, index } = explained(deviations, gains)
  // A split that leaves nothing over would divide by zero; a millionth of a millionth of the whole stands for nothing.
  const rest = Math.max(sumOfSquares - best, sumOfSquares * 1e-12)
  const all = Array.from(values)
  return {
    index,
    statistic: sumOfSquares > 0 ? n * Math.log(sumOfSquares / rest) : 0,
    maximumT: sumOfSquares > 0 ? Math.sqrt(((n - 2) * best) / rest) : 0,
    pValue: sumOfSquares > 0 ? permutationProbability(deviations, best) : 1,
    interval: likelyPlaces(gains, sumOfSquares, best, index),
    before: sideOf(all.slice(0, index)),
    after: sideOf(all.slice(index)),
  }
}

function sideOf(values: number[]): { n: number; mean: number; sd: number | null } {
  if (values.length === 1) return { n: 1, mean: values[0]!, sd: null }
  const { n, mean, sd } = summarise(values)
  return { n, mean, sd }
}

function permutationProbability(deviations: Float64Array, best: number): number {
  const random = seededRandom(SEED)
  const shuffled = Float64Array.from(deviations)
  const scratch = new Float64Array(deviations.length)
  const times = Math.max(199, Math.min(PERMUTATIONS, Math.floor(MOST_STEPS / deviations.length)))
  let asGood = 0
  for (let time = 0; time < times; time++) {
    shuffle(shuffled, random)
    if (explained(shuffled, scratch).best >= best * (1 - 1e-12)) asGood++
  }
  return (asGood + 1) / (times + 1)
}

function likelyPlaces(gains: Float64Array, sumOfSquares: number, best: number, index: number): [number, number] {
  const n = gains.length
  const logLikelihood = (gain: number): number => (-n / 2) * Math.log(Math.max(sumOfSquares - gain, sumOfSquares * 1e-12))
  const floor = logLikelihood(best) - LIKELIHOOD_DROP
  let from = index
  let to = index
  for (let split = 1; split < n; split++) {
    if (logLikelihood(gains[split]!) < floor) continue
    from = Math.min(from, split)
    to = Math.max(to, split)
  }
  return [from, to]
}
