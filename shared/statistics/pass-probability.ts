import { acceptanceValue, highestReference, referenceValue, roundAcceptanceValue, UNIFORMITY_RULE } from './acceptance-value.ts'
import { normalCumulative } from './distributions/normal.ts'
import { requireFinite, requirePositive, requireWhole, StatisticsError } from './errors.ts'
import { normalDraws } from './normal-draws.ts'
import { seededRandom } from './random.ts'
import { gaussLegendre } from './run-length/gauss-legendre.ts'

/** The contents of a batch, percent of claim: normal with this mean and SD. */
export interface BatchContents {
  mean: number
  sd: number
  /** T, percent of claim; 100 unless stated. */
  target?: number | undefined
}

export interface SimulationSize {
  /** A whole number; the same seed gives the same answer. */
  seed?: number | undefined
  /** Simulated tests; the standard error is at most 0.5/√lots. */
  lots?: number | undefined
}

export interface PassProbability {
  /** From 0 to 1. */
  probability: number
  standardError: number
  lots: number
}

export const PASS_LOTS = { usual: 200_000, max: 1_000_000 } as const
const DEFAULT_SEED = 905
/** A value below this is rounded to 15.0 or less, and so passes. */
const EFFECTIVE_LIMIT = UNIFORMITY_RULE.limit + 0.05

/**
 * The chance that a batch passes USP <905> by content, both stages counted, if its contents are normal.
 *
 * Method  seeded simulation of whole tests of 30 units, the first ten of which may pass alone. The acceptance value is rounded
 *         to one decimal before it is compared, as the verdict itself does. The share in which the 30 meet the acceptance
 *         value is known without simulation (see {@link acceptanceValueProbability}) and serves as a control variate, which
 *         takes most of the chance out of the answer.
 * @param contents mean and SD in percent of claim
 * @throws {StatisticsError} `not-finite`, `out-of-range`, `not-positive`, `not-whole`
 * @see USP <905>; Pharmaceutical Technology, 2 October 2007, for judging the test by simulation; cases in fixtures/reference/pass-probability.json
 */
export function passProbability(contents: BatchContents, size: SimulationSize = {}): PassProbability {
  const { mean, sd, target } = checkedContents(contents)
  const { seed, lots } = checkedSize(size)
  const draw = normalDraws(seededRandom(seed))
  const units = new Float64Array(30)
  const tally = { lots, passed: 0, withinAtThirty: 0, both: 0 }
  for (let lot = 0; lot < lots; lot++) {
    for (let place = 0; place < 30; place++) units[place] = mean + sd * draw()
    const isWithinAtThirty = isWithin(units, 30, 2, target)
    const passes = isWithin(units, 10, 2.4, target) || (isWithinAtThirty && noneFarOff(units, target))
    if (isWithinAtThirty) tally.withinAtThirty++
    if (passes) tally.passed++
    if (passes && isWithinAtThirty) tally.both++
  }
  return sd === 0 ? shareOf(tally.passed, lots) : controlled(tally, acceptanceValueProbability({ mean, sd, target }, 2))
}

interface Tally {
  lots: number
  passed: number
  withinAtThirty: number
  both: number
}

/** The share of passes, corrected by how far the simulated share of the control lies from its exact chance. */
function controlled({ lots, passed, withinAtThirty, both }: Tally, exact: number): PassProbability {
  const simulated = withinAtThirty / lots
  const spread = simulated * (1 - simulated)
  if (spread === 0) return shareOf(passed, lots)
  const share = passed / lots
  const slope = (both / lots - share * simulated) / spread
  const variance = Math.max(0, share * (1 - share) - slope * slope * spread)
  const probability = Math.min(1, Math.max(0, share - slope * (simulated - exact)))
  return { probability, standardError: Math.max(Math.sqrt(variance / lots), 1 / lots), lots }
}

/** A share of simulated tests with its standard error; one unseen outcome in all lots still leaves an error of 1/lots. */
export function shareOf(passed: number, lots: number): PassProbability {
  const probability = passed / lots
  return { probability, standardError: Math.max(Math.sqrt((probability * (1 - probability)) / lots), 1 / lots), lots }
}

/** The size of a simulation, checked, with its usual values filled in. */
export function checkedSize({ seed = DEFAULT_SEED, lots = PASS_LOTS.usual }: SimulationSize): { seed: number; lots: number } {
  requireWhole('seed', seed, { min: 0, max: 4_294_967_295 })
  requireWhole('lots', lots, { min: 100, max: PASS_LOTS.max })
  return { seed, lots }
}

function checkedContents({ mean, sd, target = 100 }: BatchContents): Required<BatchContents> & { target: number } {
  requirePositive('mean', mean)
  requireFinite('sd', sd)
  requirePositive('target', target)
  if (sd < 0) throw new StatisticsError('out-of-range', 'sd', 'sd cannot be negative.')
  return { mean, sd, target }
}

function meanOf(units: Float64Array, n: number): number {
  let sum = 0
  for (let place = 0; place < n; place++) sum += units[place]!
  return sum / n
}

function isWithin(units: Float64Array, n: number, k: number, target: number): boolean {
  const mean = meanOf(units, n)
  let squares = 0
  for (let place = 0; place < n; place++) squares += (units[place]! - mean) ** 2
  return roundAcceptanceValueQuickly(acceptanceValue({ mean, sd: Math.sqrt(squares / (n - 1)), k }, target)) <= UNIFORMITY_RULE.limit
}

/** Far from the border the rounding decides nothing, and it is the slow part of a lot. */
function roundAcceptanceValueQuickly(value: number): number {
  return Math.abs(value - EFFECTIVE_LIMIT) > 0.01 ? value - 0.05 : roundAcceptanceValue(value)
}

function noneFarOff(units: Float64Array, target: number): boolean {
  const m = referenceValue(meanOf(units, 30), target)
  const share = UNIFORMITY_RULE.unitLimitPercent / 100
  return units.every((unit) => unit >= (1 - share) * m && unit <= (1 + share) * m)
}

/**
 * The chance that n units have an acceptance value within the limit, without simulation.
 *
 * Formula  ∫ f(s)·P(98.5 − (L − k·s) ≤ X̄ ≤ U + (L − k·s)) ds from 0 to L/k, with f the density of the SD of n normal values
 *          and U = max(101.5, T); 200 Gauss–Legendre nodes.
 * @param contents mean and SD in percent of claim, SD above zero
 * @param stage 1 or 2
 * @param limit below which a value passes: 15.05, since 15.05 is the first that is rounded to more than 15.0
 * @throws {StatisticsError} `not-finite`, `not-positive`
 * @see check values (limit 15.0) in the notes of fixtures/reference/pass-probability.json
 */
export function acceptanceValueProbability(contents: BatchContents, stage: 1 | 2, limit: number = EFFECTIVE_LIMIT): number {
  const { mean, sd, target } = checkedContents(contents)
  requirePositive('sd', sd)
  const { n, k } = UNIFORMITY_RULE.stages[stage - 1]!
  const { nodes, weights } = gaussLegendre(200, { lower: 0, upper: limit / k })
  const sdOfMean = sd / Math.sqrt(n)
  const high = highestReference(target)
  let probability = 0
  nodes.forEach((s, place) => {
    const slack = limit - k * s
    const upper = normalCumulative((high + slack - mean) / sdOfMean)
    const lower = normalCumulative((UNIFORMITY_RULE.lowestReference - slack - mean) / sdOfMean)
    probability += weights[place]! * densityOfSd(s, sd, n - 1) * (upper - lower)
  })
  return Math.min(1, probability)
}

/** Density of the SD of df + 1 normal values, df odd: √(χ²/df)·σ. */
function densityOfSd(s: number, sigma: number, df: number): number {
  const ratio = s / sigma
  const logScale = (df / 2) * Math.log(df / 2) - logGammaOfHalf(df)
  return (2 / sigma) * Math.exp(logScale + (df - 1) * Math.log(ratio) - (df / 2) * ratio * ratio)
}

/** ln Γ(df/2) for odd df, climbed from Γ(1/2) = √π. */
function logGammaOfHalf(df: number): number {
  let value = Math.log(Math.PI) / 2
  for (let half = 0.5; half < df / 2; half++) value += Math.log(half)
  return value
}

/**
 * A floor under the chance of passing, without simulation: the larger of the chance of the first stage and a lower bound
 * of the second, P(AV of 30) + P(every unit within the tightest single-unit limits) − 1.
 * @param contents mean and SD in percent of claim, SD above zero
 * @returns from 0 to 1; never above {@link passProbability} but for its simulation error
 * @throws {StatisticsError} `not-finite`, `not-positive`
 * @see the bounding of ASTM E2810, whose text was not at hand
 */
export function passProbabilityFloor(contents: BatchContents): number {
  const { mean, sd, target } = checkedContents(contents)
  const share = UNIFORMITY_RULE.unitLimitPercent / 100
  const lowest = (1 - share) * highestReference(target)
  const highest = (1 + share) * UNIFORMITY_RULE.lowestReference
  const oneWithin = normalCumulative((highest - mean) / sd) - normalCumulative((lowest - mean) / sd)
  const secondStage = acceptanceValueProbability(contents, 2) + Math.max(0, oneWithin) ** 30 - 1
  return Math.max(acceptanceValueProbability(contents, 1), secondStage)
}
